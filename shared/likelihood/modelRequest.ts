import type { Background } from "~shared/cosmology/background";
import type { History } from "~shared/history/history";

/** What a row asks of a history: one number, or x over an uncertain redshift. */
export type ModelRequest =
  | { readonly kind: "point"; readonly z: number }
  | { readonly kind: "binMean"; readonly zLow: number; readonly zHigh: number }
  /** The likelihood is averaged over [zLow, zHigh]; the model value shown is x at z. */
  | {
      readonly kind: "averaged";
      readonly zLow: number;
      readonly zHigh: number;
      readonly z: number;
    }
  | { readonly kind: "opticalDepth"; readonly z1: number; readonly z2: number }
  | { readonly kind: "redshiftAtFraction"; readonly f: number }
  | {
      readonly kind: "duration";
      readonly f1: number;
      readonly f2: number;
      readonly unit: "redshift" | "myr";
    };

/** Why a history has no value for a request. */
export type NoModelCode = "outsideTable" | "noSuchRedshift";

/** A model value, or why a history has none. */
export type ModelAnswer =
  | { readonly model: number; readonly code?: undefined; readonly reason?: undefined }
  | { readonly model: null; readonly code: NoModelCode; readonly reason: string };

/**
 * What a history says about a request. A tabulated history is not extrapolated for a row at a
 * redshift; optical depths take its end values outside.
 *
 * @param background - Cosmology for optical depths and times.
 * @returns The model value: a fraction, an optical depth, a redshift or a duration in Δz or Myr; or null
 *   with the reason.
 */
export function modelValue(
  request: ModelRequest,
  history: History,
  background: Background,
): ModelAnswer {
  switch (request.kind) {
    case "point":
      return within(history, request.z, request.z, () => history.x(request.z));
    case "binMean":
      return within(history, request.zLow, request.zHigh, () =>
        history.binMean(request.zLow, request.zHigh),
      );
    case "averaged":
      return within(history, request.zLow, request.zHigh, () => history.x(request.z));
    case "opticalDepth":
      return { model: history.opticalDepth(background, request.z1, request.z2) };
    case "redshiftAtFraction":
      return orMissing(history.redshiftAtFraction(request.f), `x = ${request.f}`);
    case "duration": {
      const { f1, f2, unit } = request;
      const model =
        unit === "myr" ? history.durationMyr(background, f1, f2) : history.duration(f1, f2);
      return orMissing(model, `both x = ${f1} and x = ${f2}`);
    }
  }
}

function within(history: History, low: number, high: number, value: () => number): ModelAnswer {
  if (history.covers(low, high)) return { model: value() };
  const [first, last] = history.covered!;
  return {
    model: null,
    code: "outsideTable",
    reason: `The table of this history covers z = ${first} to ${last} only.`,
  };
}

function orMissing(model: number | null, what: string): ModelAnswer {
  if (model !== null) return { model };
  return {
    model,
    code: "noSuchRedshift",
    reason: `The history does not pass ${what} at any redshift.`,
  };
}

/** Whether two requests ask for the same number in the same way; true also for two objects. */
export function sameRequest(a: ModelRequest, b: ModelRequest): boolean {
  return JSON.stringify(a) === JSON.stringify(b);
}
