export { distributionOf } from "./distribution";
export { FORM_NAMES, FORM_WORDS, type FormName } from "./forms";
export {
  rowLikelihood,
  type LeftOutCode,
  type RedshiftTreatment,
  type RowEvaluation,
  type RowLeftOut,
  type RowLikelihood,
  type RowOptions,
} from "./rowLikelihood";
export { scoreSet, type SetScore, type SetToScore } from "./scoreSet";
export { scoreRows, type RowScore, type RowToScore, type Score } from "./scoreRows";
