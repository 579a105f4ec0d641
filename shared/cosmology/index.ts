export {
  Background,
  background,
  type BackgroundParameters,
  DEFAULT_BACKGROUND,
  HIGHEST_REDSHIFT,
  secondHelium,
} from "./background";
export { frequencyOf21cmMHz, redshiftOf21cm } from "./line21cm";
