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
    xEnds: band ? null : ends,
    zEnds: low !== null && high !== null && low < high ? [low, high] : null,
    bin: used.zRole === "binAverage" || used.zRole === "sampleRange",
    arrow: limit === null ? null : { along: "x", direction: limit },
    band: band && ends !== null ? { along: "x", ends } : null,
    hollow: band || limit !== null,
    levelStated: used.level !== null,
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
    zEnds: band ? null : span.ends,
    bin: false,
    arrow: limit === null ? null : { along: "z", direction: limit },
    band: band && span.ends !== null ? { along: "z", ends: span.ends } : null,
    hollow: band || limit !== null,
    levelStated: used.level !== null,
  };
}

/** Centre and ends of a statement along its own quantity; null where it holds no number. */
export function statementSpan(
  used: AsUsed,
): { centre: number; ends: readonly [number, number] | null } | null {
  if (used.kind === "band") {
    if (used.low === null || used.high === null) return null;
    const ends = [Number(used.low), Number(used.high)] as const;
    return { centre: 0.5 * (ends[0] + ends[1]), ends };
  }
  const text = used.value ?? used.limitBase;
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
