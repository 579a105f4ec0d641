export { FAMILY_MARKS, type MarkerShape } from "~shared/chart/familyMarks";
