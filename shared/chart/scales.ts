/** Positions on an axis: pure functions between data and drawing units. */
import { DomainError } from "~shared/errors/DomainError";

export type Interval = readonly [start: number, end: number];

export interface Scale {
  kind: "linear" | "log";
  /** In data units; the start may be the larger one. */
  domain: Interval;
  /** In drawing units. */
  range: Interval;
  /** Drawing position of a value; a log scale puts values that are not positive at −∞ of its axis. */
  at(value: number): number;
  /** Value at a drawing position. */
  invert(position: number): number;
}

/**
 * A linear axis.
 *
 * @throws {DomainError} If the domain is empty or not finite.
 */
export function linearScale(domain: Interval, range: Interval): Scale {
  requireSpan(domain);
  const slope = (range[1] - range[0]) / (domain[1] - domain[0]);
  return {
    kind: "linear",
    domain,
    range,
    at: (value) => range[0] + (value - domain[0]) * slope,
    invert: (position) => domain[0] + (position - range[0]) / slope,
  };
}

/**
 * A logarithmic axis, base 10.
 *
 * @throws {DomainError} If an end of the domain is not positive, or the domain is empty.
 */
export function logScale(domain: Interval, range: Interval): Scale {
  requireSpan(domain);
  if (!(domain[0] > 0)) throw new DomainError("domain start", domain[0], "positive");
  if (!(domain[1] > 0)) throw new DomainError("domain end", domain[1], "positive");
  const inner = linearScale([Math.log10(domain[0]), Math.log10(domain[1])], range);
  const below = range[0] === range[1] ? range[0] : range[0] - 1e3 * Math.sign(range[1] - range[0]);
  return {
    kind: "log",
    domain,
    range,
    // Far off the axis but finite, so that a path stays drawable.
    at: (value) => (value > 0 ? inner.at(Math.log10(value)) : below),
    invert: (position) => 10 ** inner.invert(position),
  };
}

function requireSpan(domain: Interval): void {
  for (const end of domain) {
    if (!Number.isFinite(end)) throw new DomainError("domain end", end, "finite");
  }
  if (domain[0] === domain[1]) throw new DomainError("domain", domain[0], "wider than a point");
}
