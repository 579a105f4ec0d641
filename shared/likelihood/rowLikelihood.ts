import type { Background } from "~shared/cosmology/background";
import { DomainError } from "~shared/errors/DomainError";
import type { History } from "~shared/history/history";
import { averagedMinus2LnL } from "~shared/likelihood/averaged";
import { distributionOf, type Range } from "~shared/likelihood/distribution";
import {
  band,
  bandWideTails,
  flatThenGaussian,
  type Form,
  FORM_WORDS,
  type FormName,
  type FormWarning,
  gaussian,
  halfGaussianBounded,
  halfGaussianUnbounded,
  hardStep,
  type LimitSide,
  quantileMatched,
  smoothedStep,
  tabulated,
  twoPiece,
  variableWidth,
} from "~shared/likelihood/forms";
import { informationLoss } from "~shared/likelihood/informationLoss";
import { type ModelRequest, modelValue } from "~shared/likelihood/modelRequest";
import { sigmasOfLevel } from "~shared/numerics/special";
import type { AsUsed } from "~shared/statement/asUsed";
import type { CurveNodes } from "~shared/statement/curve";
import type { Quantity } from "~shared/statement/fields";

/** How a history's redshift range meets a row. */
export type RedshiftTreatment = "point" | "binMean" | "averagedLikelihood";

/** What a table can settle about a row; what is left open takes its default. */
export interface RowOptions {
  readonly form?: FormName;
  /** Level decided on where the paper states none, a probability. */
  readonly level?: number;
  /** Width of a smoothed step, entered with a reason. */
  readonly smoothing?: number;
  readonly redshift?: RedshiftTreatment;
  /** Use a mass-weighted value as if it were volume-weighted. */
  readonly acceptMassWeighted?: boolean;
  /** Nodes of a curve in place of the record's own, in the variable the row is evaluated in, [n] each. */
  readonly curve?: CurveNodes;
}

/** Why a row is left out, as a stable word. */
export type LeftOutCode =
  | "incomplete"
  | "qualitative"
  | "massWeighted"
  | "levelNotStated"
  | "limitNeedsForm"
  | "formDoesNotFit"
  | "curveMissing"
  | "outsideTable"
  | "noSuchRedshift"
  | "anotherAlternative";

/** Why a row has no likelihood yet, in words and as a code. */
export interface RowLeftOut {
  readonly leftOut: string;
  readonly code: LeftOutCode;
}

/** A row's model value and −2 ln L; both null with a reason where the history does not give them. */
export interface RowEvaluation {
  readonly model: number | null;
  readonly minus2LnL: number | null;
  readonly reason?: string;
  readonly code?: LeftOutCode;
}

/** A curve for drawing. */
export interface LikelihoodCurvePoints {
  /** Places, ascending, [n]; log10 of the fraction where the row is evaluated in log10. */
  readonly x: number[];
  /** Density at those places, normalized over the drawn range; [n]. */
  readonly density: number[];
}

/** A statement ready to be compared with a model. */
export interface RowLikelihood {
  readonly form: FormName;
  /** The form's name in words and −2 ln L with this row's numbers. */
  readonly formula: string;
  readonly quantity: Quantity;
  readonly evaluatedIn: "linear" | "log10";
  readonly redshift: RedshiftTreatment;
  /** What the row asks of a history. */
  readonly request: ModelRequest;
  readonly warnings: readonly FormWarning[];
  readonly shape: Form;
  /** −2 ln L at a model value of the quantity (a fraction also where evaluated in log10). */
  minus2LnL(model: number): number;
  /**
   * Quantiles of the row under a flat prior in its variable: on the form's own domain where that has
   * a closed form, else over the range of the quantity.
   * @param probabilities - Each strictly between 0 and 1.
   * @returns Null where the likelihood can't be normalized, as for a lower limit on an optical depth.
   */
  quantiles(probabilities: readonly number[]): number[] | null;
  /**
   * What the record's quoted numbers, in their default form, lose of its curve: D_KL(curve‖summary) in
   * nats over the range of the quantity. +Infinity where they exclude what the curve allows; null for a
   * row that is not evaluated as a curve, or that quotes no numbers beside it.
   */
  informationLost(): number | null;
  /** n ≥ 2 points for drawing: 0 to 1 for a fraction, as far as L reaches otherwise. */
  curve(n: number): LikelihoodCurvePoints;
  evaluate(history: History, background: Background): RowEvaluation;
}

/**
 * The likelihood of one statement.
 *
 * @param used - The statement as used; null for a record that can't be used.
 * @param options - What a table decided; defaults otherwise.
 * @returns The row, or why it is left out until someone decides.
 */
export function rowLikelihood(
  used: AsUsed | null,
  options: RowOptions = {},
): RowLikelihood | RowLeftOut {
  if (used === null) return leftOut("incomplete", "The record does not say enough to be used.");
  const obstacle = obstacleOf(used, options);
  if (obstacle) return obstacle;
  const shape = shapeOf(used, options);
  if ("leftOut" in shape) return shape;

  const redshift = treatmentOf(used, options);
  const request = requestOf(used, redshift);
  const inLog = used.evaluatedIn === "log10";
  const minus2LnL = inLog
    ? (model: number): number => shape.minus2LnL(Math.log10(model))
    : shape.minus2LnL;
  const range = rangeOf(used);
  return {
    form: shape.name,
    formula: `${FORM_WORDS[shape.name]}: ${shape.formula.replace(/\b[xq]\b/g, symbolOf(used))}`,
    quantity: used.quantity,
    evaluatedIn: used.evaluatedIn,
    redshift,
    request,
    warnings: shape.warnings,
    shape,
    minus2LnL,
    quantiles: (probabilities) => quantilesOf(shape, range, probabilities),
    informationLost: () => {
      if (shape.name !== "tabulated") return null;
      const { form: _, ...others } = options;
      const summary = quotedShape(used, others);
      return "leftOut" in summary ? null : informationLoss(shape, summary, range);
    },
    curve: (n) => curveOf(shape, used, range, n),
    evaluate: (history, background) => {
      const answer = modelValue(request, history, background);
      if (answer.model === null) return { ...answer, minus2LnL: null };
      return {
        model: answer.model,
        minus2LnL:
          request.kind === "averaged"
            ? averagedMinus2LnL(minus2LnL, history, request.zLow, request.zHigh)
            : minus2LnL(answer.model),
      };
    },
  };
}

function leftOut(code: LeftOutCode, text: string): RowLeftOut {
  return { leftOut: text, code };
}

const QUALITATIVE = leftOut("qualitative", "Qualitative: shown, never fitted.");

function obstacleOf(used: AsUsed, options: RowOptions): RowLeftOut | null {
  if (used.kind === "qualitative") {
    return QUALITATIVE;
  }
  if (
    used.weighting === "mass" &&
    used.quantity === "neutralFraction" &&
    !options.acceptMassWeighted
  ) {
    return leftOut("massWeighted", "Mass-weighted: not converted to a volume average.");
  }
  if (
    used.quantity === "neutralFraction" &&
    used.z === null &&
    (used.zLow === null || used.zHigh === null)
  ) {
    return leftOut("incomplete", "The record has no redshift.");
  }
  if (
    used.quantity === "opticalDepthRange" &&
    (used.rangeLow === null || used.rangeHigh === null)
  ) {
    return leftOut("incomplete", "The optical depth has no redshift range.");
  }
  if (used.quantity === "redshiftAtFraction" && used.fraction === null) {
    return leftOut("incomplete", "The redshift has no fraction.");
  }
  if (used.quantity === "duration" && (used.fractionFrom === null || used.fractionTo === null)) {
    return leftOut("incomplete", "The duration has no fractions.");
  }
  return null;
}

/** The form of a statement: its default, or the one chosen. */
function shapeOf(used: AsUsed, options: RowOptions): Form | RowLeftOut {
  const curve = options.curve ?? used.curve;
  const { form } = options;
  // A curve is evaluated as it stands, unless another form is chosen for what it quotes beside it.
  if (curve && (form === undefined || form === "tabulated")) return curveShape(curve);
  if (used.kind === "curve" && !curve && form === undefined) {
    return leftOut("curveMissing", "The nodes of the curve are not at hand.");
  }
  return quotedShape(used, options);
}

/** The form of the numbers a statement quotes. */
function quotedShape(used: AsUsed, options: RowOptions): Form | RowLeftOut {
  const level = used.level ?? options.level ?? null;
  const stated = level === null ? null : { level, k: sigmasOfLevel(level) };
  switch (used.kind) {
    case "twoSided":
      return twoSidedShape(used, options, stated);
    case "upperLimit":
      return limitShape(used, options, "upper", stated);
    case "lowerLimit":
      return limitShape(used, options, "lower", stated);
    case "band":
      return bandShape(used, options, stated);
    case "curve":
      return used.value === null
        ? doesNotFit(options.form ?? "twoPiece", "a curve that quotes no interval")
        : twoSidedShape(used, options, stated);
    case "qualitative":
      return QUALITATIVE;
  }
}

function curveShape({ x, p }: CurveNodes): Form | RowLeftOut {
  try {
    return tabulated(x, p);
  } catch (error) {
    // What a record holds is no mistake of the program: it is said, and the row left out.
    if (error instanceof DomainError) {
      return leftOut("formDoesNotFit", `The curve can't be used: ${error.message}.`);
    }
    throw error;
  }
}

/** A level, stated or decided on, with the half-width it has in sigma. */
interface StatedLevel {
  readonly level: number;
  readonly k: number;
}

const LEVEL_OPEN = leftOut("levelNotStated", "The paper states no level: a decision is needed.");

function twoSidedShape(
  used: AsUsed,
  options: RowOptions,
  stated: StatedLevel | null,
): Form | RowLeftOut {
  const m = numberIn(used.value);
  const minus = numberIn(used.minus);
  const plus = numberIn(used.plus);
  if (m === null || minus === null || plus === null) {
    return leftOut("incomplete", "The value or one of its errors is missing.");
  }
  if (stated === null) return LEVEL_OPEN;
  if (!(minus > 0 && plus > 0)) {
    return leftOut("formDoesNotFit", "A two-sided value needs errors above zero.");
  }
  const symmetric = minus === plus;
  const isFraction = used.quantity === "neutralFraction";
  const chosen =
    options.form ??
    (symmetric && !isFraction
      ? "gaussian"
      : used.estimator === "median"
        ? "quantileMatched"
        : "twoPiece");
  const { k } = stated;
  const below = minus / k;
  const above = plus / k;
  switch (chosen) {
    case "twoPiece":
      return twoPiece(m, below, above);
    case "quantileMatched":
      return quantileMatched(m, below, above, k);
    case "variableWidth":
      return variableWidth(m, minus, plus, k);
    case "gaussian":
      return symmetric
        ? gaussian(m, below)
        : leftOut("formDoesNotFit", "A Gaussian needs equal errors on both sides.");
    default:
      return doesNotFit(chosen, "a two-sided value");
  }
}

function limitShape(
  used: AsUsed,
  options: RowOptions,
  side: LimitSide,
  stated: StatedLevel | null,
): Form | RowLeftOut {
  const limit = numberIn(used.limitBase) ?? numberIn(used.value);
  if (limit === null) return leftOut("incomplete", "The limit is missing.");
  const width = numberIn(used.limitSigma);
  // A width of nothing is no width.
  const own = width !== null && width > 0 ? width : null;
  const isFraction = used.quantity === "neutralFraction" && used.evaluatedIn === "linear";
  const chosen = options.form ?? defaultLimitForm(used, side, own, isFraction);
  if (chosen === null) {
    return leftOut(
      "limitNeedsForm",
      side === "lower" && used.quantity !== "redshiftAtFraction"
        ? "A lower limit on this quantity without a width of its own needs a decision; a hard step is proposed."
        : "A limit on this quantity without a width of its own needs a decision; a hard step is proposed.",
    );
  }
  switch (chosen) {
    case "flatThenGaussian":
      if (own === null) {
        return leftOut(
          "formDoesNotFit",
          "Flat, then Gaussian needs a base and a width of its own.",
        );
      }
      return stated === null ? LEVEL_OPEN : flatThenGaussian(side, limit, own / stated.k);
    case "smoothedStep": {
      // A width stated is a width at the level; a width entered is the step's own.
      const s = options.smoothing ?? (own !== null && stated !== null ? own / stated.k : null);
      return s !== null && s > 0
        ? smoothedStep(side, limit, s)
        : leftOut("formDoesNotFit", "A smoothed step needs a width.");
    }
    case "hardStep":
      return hardStep(side, limit);
    case "halfGaussianBounded":
      if (stated === null) return LEVEL_OPEN;
      return isFraction && limit > 0 && limit < 1
        ? halfGaussianBounded(side, limit, stated.level)
        : leftOut("formDoesNotFit", "The bounded half-Gaussian needs a limit between 0 and 1.");
    case "halfGaussianUnbounded":
      if (stated === null) return LEVEL_OPEN;
      return (side === "upper" ? limit > 0 : isFraction && limit < 1)
        ? halfGaussianUnbounded(side, limit, stated.k)
        : leftOut(
            "formDoesNotFit",
            "The half-Gaussian needs a limit away from where it is centred.",
          );
    default:
      return doesNotFit(chosen, "a limit");
  }
}

function defaultLimitForm(
  used: AsUsed,
  side: LimitSide,
  own: number | null,
  isFraction: boolean,
): FormName | null {
  if (own !== null) return "flatThenGaussian";
  if (isFraction) return "halfGaussianBounded";
  if (used.quantity === "redshiftAtFraction" || side === "lower") return null;
  return "halfGaussianUnbounded";
}

function bandShape(
  used: AsUsed,
  options: RowOptions,
  stated: StatedLevel | null,
): Form | RowLeftOut {
  const low = numberIn(used.low);
  const high = numberIn(used.high);
  if (low === null || high === null) return leftOut("incomplete", "An end of the band is missing.");
  if (!(high > low)) return leftOut("formDoesNotFit", "A band needs its ends in order.");
  if (stated === null) return LEVEL_OPEN;
  const range = rangeOf(used);
  switch (options.form ?? "band") {
    case "band":
      return band(low, high, stated.level, range);
    case "bandWideTails":
      return bandWideTails(low, high, stated.k, range);
    default:
      return doesNotFit(options.form!, "a band");
  }
}

function doesNotFit(name: FormName, kind: string): RowLeftOut {
  return leftOut("formDoesNotFit", `The form “${FORM_WORDS[name]}” does not fit ${kind}.`);
}

function numberIn(text: string | null): number | null {
  if (text === null) return null;
  const value = Number(text.replace("\u2212", "-"));
  return Number.isFinite(value) ? value : null;
}

/** Range of the variable a row is evaluated in. */
function rangeOf(used: AsUsed): Range {
  if (used.quantity !== "neutralFraction") return [0, Infinity];
  return used.evaluatedIn === "log10" ? [-Infinity, 0] : [0, 1];
}

function symbolOf(used: AsUsed): string {
  if (used.evaluatedIn === "log10") return "log x";
  switch (used.quantity) {
    case "neutralFraction":
      return "x";
    case "opticalDepth":
    case "opticalDepthRange":
      return "τ";
    case "redshiftAtFraction":
      return "z";
    case "duration":
      return "Δ";
  }
}

function treatmentOf(used: AsUsed, options: RowOptions): RedshiftTreatment {
  if (used.quantity !== "neutralFraction") return "point";
  const hasRange = used.zLow !== null && used.zHigh !== null && used.zHigh > used.zLow;
  const wanted =
    options.redshift ??
    (used.zRole === "binAverage"
      ? "binMean"
      : used.zRole === "uncertain"
        ? "averagedLikelihood"
        : "point");
  if (wanted === "point") return used.z === null && hasRange ? "binMean" : "point";
  return hasRange ? wanted : "point";
}

function requestOf(used: AsUsed, redshift: RedshiftTreatment): ModelRequest {
  switch (used.quantity) {
    case "neutralFraction": {
      if (redshift === "point") return { kind: "point", z: used.z ?? used.zLow! };
      const zLow = used.zLow!;
      const zHigh = used.zHigh!;
      if (redshift === "binMean") return { kind: "binMean", zLow, zHigh };
      return { kind: "averaged", zLow, zHigh, z: used.z ?? 0.5 * (zLow + zHigh) };
    }
    case "opticalDepth":
      return { kind: "opticalDepth", z1: 0, z2: 50 };
    case "opticalDepthRange":
      return { kind: "opticalDepth", z1: used.rangeLow!, z2: used.rangeHigh! };
    case "redshiftAtFraction":
      return { kind: "redshiftAtFraction", f: used.fraction! };
    case "duration":
      return {
        kind: "duration",
        f1: used.fractionFrom!,
        f2: used.fractionTo!,
        unit: used.durationUnit ?? "redshift",
      };
  }
}

function quantilesOf(shape: Form, range: Range, probabilities: readonly number[]): number[] | null {
  if (shape.quantile) return probabilities.map(shape.quantile);
  const distribution = distributionOf(shape, range);
  return distribution && probabilities.map(distribution.quantile);
}

/** −2 ln L at which a drawn curve ends. */
const DRAWN = 12;

function curveOf(shape: Form, used: AsUsed, range: Range, n: number): LikelihoodCurvePoints {
  const [from, to] =
    used.quantity === "neutralFraction" && used.evaluatedIn === "linear"
      ? [0, 1]
      : drawnRange(shape, range);
  const count = Math.max(2, Math.round(n));
  const x = Array.from({ length: count }, (_, i) => from + ((to - from) * i) / (count - 1));
  const relative = x.map((at) => Math.exp(-0.5 * shape.minus2LnL(at)));
  const step = (to - from) / (count - 1);
  let area = 0;
  for (let i = 0; i + 1 < count; i++) area += 0.5 * step * (relative[i]! + relative[i + 1]!);
  return { x, density: area > 0 ? relative.map((value) => value / area) : relative };
}

function drawnRange(shape: Form, range: Range): [number, number] {
  let [from, to] = shape.reach;
  from = Math.max(from, range[0]);
  to = Math.min(to, range[1]);
  // An end where L does not fall shows as much again as the other side does.
  if (from === -Infinity) from = to - 2 * Math.abs(to - shape.kinks[0]!);
  if (to === Infinity) to = from + 3 * Math.abs(shape.kinks[0]! - from || 1);
  const shrink = (end: number, towards: number): number => {
    if (shape.minus2LnL(end) <= DRAWN) return end;
    let inside = towards;
    let outside = end;
    for (let i = 0; i < 50; i++) {
      const middle = 0.5 * (inside + outside);
      if (shape.minus2LnL(middle) > DRAWN) outside = middle;
      else inside = middle;
    }
    return outside;
  };
  const centre = Math.min(Math.max(shape.peak, from), to);
  return [shrink(from, centre), shrink(to, centre)];
}
