import type { Background } from "~shared/cosmology/background";
import { powerLawHistory } from "~shared/history/powerLaw";
import type { FitParameter } from "~shared/inference/families";
import { depthSurfaces, type Predictor, rootsPredictor } from "~shared/inference/predictor";
import type { ModelRequests } from "~shared/likelihood/compile";

// Taken once: in a sandboxed realm every look-up of a global costs more than the arithmetic.
const { exp, expm1, log1p, max } = Math;

/**
 * The power-law family at a fixed z_early without objects: points and bins in closed form, optical
 * depths from a surface over the prior's box.
 *
 * @param parameters - z_end and α with the ends of their priors.
 * @param zEarly - Above the highest z_end.
 */
export function powerLawPredictor(
  requests: ModelRequests,
  background: Background,
  parameters: readonly FitParameter[],
  zEarly: number,
): Predictor {
  const { points, binLows, binHighs } = requests;
  // Optical depths go roughly as 1/(1 + α): in ln(1 + α) they are as smooth as in z_end.
  const [ends, exponents] = parameters;
  const smooth = {
    name: "ln(1 + alpha)",
    low: log1p(exponents!.low),
    high: log1p(exponents!.high),
  };
  const depths = depthSurfaces(requests, background, [ends!, smooth], (zEnd, logAlpha) =>
    powerLawHistory({ zEnd, alpha: expm1(logAlpha), zEarly }),
  );
  const roots = rootsPredictor(requests, background);
  return (theta, out) => {
    const zEnd = theta[0]!;
    const alpha = theta[1]!;
    const span = zEarly - zEnd;
    let at = 0;
    for (let i = 0; i < points.length; i++) {
      const z = points[i]!;
      out[at++] = z <= zEnd ? 0 : z >= zEarly ? 1 : -expm1(alpha * log1p((zEnd - z) / span));
    }
    for (let i = 0; i < binLows.length; i++) {
      const low = binLows[i]!;
      const high = binHighs[i]!;
      const ionized =
        ionizedAbove(low, zEnd, zEarly, alpha) - ionizedAbove(high, zEnd, zEarly, alpha);
      out[at++] = max(0, 1 - ionized / (high - low));
    }
    const logAlpha = log1p(alpha);
    for (let i = 0; i < depths.length; i++) out[at++] = depths[i]!.value(zEnd, logAlpha);
    roots((f) => zEarly - span * exp(log1p(-f) / alpha), out);
  };
}

/** ∫ Q dz from z up to z_early. */
function ionizedAbove(z: number, zEnd: number, zEarly: number, alpha: number): number {
  const span = zEarly - zEnd;
  if (z >= zEarly) return 0;
  if (z <= zEnd) return zEnd - z + span / (alpha + 1);
  return (span / (alpha + 1)) * ((zEarly - z) / span) ** (alpha + 1);
}
