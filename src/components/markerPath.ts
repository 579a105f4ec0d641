export { markerPath } from "~shared/chart/markerPath";
