/** From a statement as used to the ends of what is drawn for it, in data units. */
import type { AsUsed } from "~shared/statement/asUsed";
import type { StatementKind } from "~shared/statement/fields";

/** A statement in the plane of redshift and neutral fraction. */
export interface PlanePoint {
  kind: StatementKind;
  /** Where the marker stands. */
  z: number;
  x: number;
  /** Ends of the bar along the fraction, low and high; null without one. */
  xEnds: readonly [number, number] | null;
  /** Ends of the bar along the redshift; null without one. */
  zEnds: readonly [number, number] | null;
  /** The ends along the redshift are a bin's and carry end ticks. */
  bin: boolean;
  /** Which way a limit allows, along which axis. */
  arrow: { along: "x" | "z"; direction: 1 | -1 } | null;
  /** The statement is an interval without a best value. */
  band: { along: "x" | "z"; ends: readonly [number, number] } | null;
  /** A tabulated curve: places along its axis, ascending, and L there relative to its peak. */
  violin: { along: "x" | "z"; at: readonly number[]; height: readonly number[] } | null;
  /** Limits and bands are hollow: there is no best value. */
  hollow: boolean;
  levelStated: boolean;
}

/**
 * What a statement looks like in the plane of redshift and neutral fraction.
 *
 * A redshift at a fraction stands at its fraction, with its error along the redshift.
 *
 * @returns Null for what has no place there: optical depths, durations, curves without nodes,
 *   qualitative statements, and statements without a redshift.
 */
export function planePoint(used: AsUsed): PlanePoint | null {
  if (used.quantity === "neutralFraction") return fractionPoint(used);
  if (used.quantity === "redshiftAtFraction") return redshiftPoint(used);
  return null;
}

function fractionPoint(used: AsUsed): PlanePoint | null {
  const low = used.zLow;
  const high = used.zHigh;
  const z = used.z ?? (low !== null && high !== null ? 0.5 * (low + high) : null);
  const span = statementSpan(used);
  if (z === null || span === null) return null;
  const real = used.evaluatedIn === "log10" ? (value: number) => 10 ** value : (v: number) => v;
  const ends: readonly [number, number] | null =
    span.ends === null ? null : [real(span.ends[0]), real(span.ends[1])];
  const band = used.kind === "band";
  const limit = limitDirection(used.kind);
  return {
    kind: used.kind,
    z,
    x: band && ends !== null ? 0.5 * (ends[0] + ends[1]) : real(span.centre),
    xEnds: band || used.kind === "curve" ? null : ends,
    zEnds: low !== null && high !== null && low < high ? [low, high] : null,
    bin: used.zRole === "binAverage" || used.zRole === "sampleRange",
    arrow: limit === null ? null : { along: "x", direction: limit },
    band: band && ends !== null ? { along: "x", ends } : null,
    violin: violinOf(used, "x", real),
    hollow: band || limit !== null,
    // A curve has no level to miss.
    levelStated: used.level !== null || used.kind === "curve",
  };
}

function redshiftPoint(used: AsUsed): PlanePoint | null {
  const span = statementSpan(used);
  if (used.fraction === null || span === null) return null;
  const limit = limitDirection(used.kind);
  const band = used.kind === "band";
  return {
    kind: used.kind,
    z: span.centre,
    x: used.fraction,
    xEnds: null,
    zEnds: band || used.kind === "curve" ? null : span.ends,
    bin: false,
    arrow: limit === null ? null : { along: "z", direction: limit },
    band: band && span.ends !== null ? { along: "z", ends: span.ends } : null,
    violin: violinOf(used, "z", (value) => value),
    hollow: band || limit !== null,
    levelStated: used.level !== null || used.kind === "curve",
  };
}

/** Below this part of its peak a curve is not drawn: e⁻². */
const VIOLIN_CUT = Math.exp(-2);

/** The curve where it is above the cut, with the places where it crosses it, ln L being linear between nodes. */
function violinOf(
  used: AsUsed,
  along: "x" | "z",
  real: (value: number) => number,
): PlanePoint["violin"] {
  if (used.kind !== "curve" || used.curve === undefined) return null;
  const { x, p } = used.curve;
  const at: number[] = [];
  const height: number[] = [];
  x.forEach((place, i) => {
    const here = p[i]!;
    const before = i > 0 ? p[i - 1]! : here;
    if (i > 0 && here > VIOLIN_CUT !== before > VIOLIN_CUT) {
      const part = Math.log(VIOLIN_CUT / before) / Math.log(here / before);
      at.push(real(x[i - 1]! + part * (place - x[i - 1]!)));
      height.push(VIOLIN_CUT);
    }
    if (here > VIOLIN_CUT) {
      at.push(real(place));
      height.push(here);
    } else if (at.length > 0) {
      // Between two peaks the drawing goes back to its base.
      at.push(real(place));
      height.push(0);
    }
  });
  while (height[height.length - 1] === 0) {
    at.pop();
    height.pop();
  }
  return { along, at, height };
}

/** What is drawn of a curve along its own quantity; null for another kind of statement. */
export function drawnCurve(
  used: AsUsed,
): { at: readonly number[]; height: readonly number[] } | null {
  return violinOf(used, "x", (value) => value);
}

/**
 * Centre and ends of a statement along its own quantity; null where it holds no number. Of a curve they
 * are its highest place and those where it falls to e⁻² of it.
 */
export function statementSpan(
  used: AsUsed,
): { centre: number; ends: readonly [number, number] | null } | null {
  if (used.kind === "band") {
    if (used.low === null || used.high === null) return null;
    const ends = [Number(used.low), Number(used.high)] as const;
    return { centre: 0.5 * (ends[0] + ends[1]), ends };
  }
  if (used.kind === "curve" && used.curve !== undefined) {
    const drawn = drawnCurve(used)!;
    return {
      centre: used.curve.x[used.curve.p.indexOf(1)]!,
      ends: [drawn.at[0]!, drawn.at[drawn.at.length - 1]!],
    };
  }
  const text = used.kind === "curve" ? null : (used.value ?? used.limitBase);
  if (text === null) return null;
  const centre = Number(text);
  if (used.kind !== "twoSided" || used.minus === null || used.plus === null) {
    return { centre, ends: null };
  }
  return { centre, ends: [centre - Number(used.minus), centre + Number(used.plus)] };
}

/** −1 for an upper limit (smaller values are allowed), +1 for a lower one, null otherwise. */
export function limitDirection(kind: StatementKind): 1 | -1 | null {
  if (kind === "upperLimit") return -1;
  return kind === "lowerLimit" ? 1 : null;
}
