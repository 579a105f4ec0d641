export type { History, HistoryKind, HistoryWarning } from "./history";
export { DEFAULT_Z_EARLY, powerLawHistory } from "./powerLaw";
export { tabulatedHistory } from "./tabulated";
export { DEFAULT_DELTA_Z, tanhHistory } from "./tanh";
