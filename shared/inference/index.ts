export {
  apart,
  type FullPosterior,
  pullOf,
  leaveOneOut,
  tension,
  type TermInfluence,
  type Tension,
} from "./comparison";
export type { ChainDiagnostics } from "./diagnostics";
export {
  sampleEnsemble,
  samplePosterior,
  type SampledPosterior,
  type SamplerOptions,
} from "./ensembleSampler";
export {
  DEFAULT_PRIORS,
  type FitFamily,
  type FitParameter,
  freeFormFamily,
  powerLawFamily,
  tanhFamily,
} from "./families";
export { gridPosterior, type GridOptions, type GridPosterior } from "./gridPosterior";
export type { Summary } from "./marginal";
export { maximumLikelihood, type MaximumLikelihood } from "./maximumLikelihood";
export { DERIVED_NAMES, type DerivedName, FitProblem } from "./problem";
export { sampledEvidence, type SampledEvidence } from "./sampledEvidence";
export {
  CancelledError,
  type Progress,
  runTask,
  runTaskInSlices,
  type Task,
  type TaskControl,
} from "./task";
