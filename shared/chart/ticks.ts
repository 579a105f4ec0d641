/** Where an axis carries its ticks. */
import { DomainError } from "~shared/errors/DomainError";
import type { Interval } from "./scales";

export interface Tick {
  /** What the tick stands for, in the unit of its label. */
  value: number;
  /** Where it stands, in the unit of the axis' scale. */
  position: number;
  major: boolean;
}

/** Multiples of a step inside an interval, free of accumulated rounding; [n], ascending. */
export function multiples(interval: Interval, step: number): number[] {
  if (!(step > 0)) throw new DomainError("step", step, "positive");
  const low = Math.min(...interval);
  const high = Math.max(...interval);
  const slack = 1e-9 * step;
  const first = Math.ceil((low - slack) / step);
  const last = Math.floor((high + slack) / step);
  const digits = Math.max(0, Math.ceil(-Math.log10(step)) + 2);
  return Array.from({ length: Math.max(0, last - first + 1) }, (_unused, i) =>
    Number(((first + i) * step).toFixed(digits)),
  );
}

/**
 * Ticks of a linear axis.
 *
 * @param domain - Ends of the axis.
 * @param major - Step of the labelled ticks.
 * @param minor - Step of the small ones; `major` must be a multiple of it.
 */
export function linearTicks(domain: Interval, major: number, minor: number): Tick[] {
  const perMajor = Math.round(major / minor);
  return multiples(domain, minor).map((value) => ({
    value,
    position: value,
    major: Math.round(value / minor) % perMajor === 0,
  }));
}

/** Ticks of a logarithmic axis: decades are major, 2 to 9 times a decade minor. */
export function logTicks(domain: Interval): Tick[] {
  const low = Math.min(...domain);
  const high = Math.max(...domain);
  if (!(low > 0)) throw new DomainError("domain", low, "positive");
  const ticks: Tick[] = [];
  for (
    let e = Math.floor(Math.log10(low) + 1e-12);
    e <= Math.floor(Math.log10(high) + 1e-12);
    e++
  ) {
    for (let m = 1; m <= 9; m++) {
      const value = Number(`${m}e${e}`);
      if (value < low * (1 - 1e-12) || value > high * (1 + 1e-12)) continue;
      ticks.push({ value, position: value, major: m === 1 });
    }
  }
  return ticks;
}

/**
 * Ticks of a second axis whose values are a monotonic function of the first: cosmic age or
 * observed frequency over redshift.
 *
 * @param domain - Ends of the first axis (redshift).
 * @param valueAt - Value of the second axis over the first; strictly monotonic on the domain.
 * @param major - Step of the labelled ticks, in the second axis' unit.
 * @param minor - Step of the small ones.
 * @returns Ticks with `position` on the first axis, ascending in value.
 */
export function derivedTicks(
  domain: Interval,
  valueAt: (position: number) => number,
  major: number,
  minor: number,
): Tick[] {
  const ends: Interval = [valueAt(domain[0]), valueAt(domain[1])];
  return linearTicks(ends, major, minor).map((tick) => ({
    ...tick,
    position: solve(valueAt, tick.value, domain, ends),
  }));
}

/** Root of valueAt(p) = value by bisection: certain, and exact to rounding after 60 halvings. */
function solve(
  valueAt: (position: number) => number,
  value: number,
  domain: Interval,
  ends: Interval,
): number {
  const rising = ends[1] > ends[0];
  let low = domain[0];
  let high = domain[1];
  for (let i = 0; i < 60; i++) {
    const middle = 0.5 * (low + high);
    if (middle === low || middle === high) break;
    if (valueAt(middle) < value === rising) low = middle;
    else high = middle;
  }
  return 0.5 * (low + high);
}

/**
 * A round step, 1, 2 or 5 times a power of ten, with about `wanted` labels over a span.
 *
 * @returns The step and the decimals its multiples need.
 */
export function roundStep(span: number, wanted = 5): { step: number; digits: number } {
  if (!(span > 0)) throw new DomainError("span", span, "positive");
  const raw = span / wanted;
  const power = 10 ** Math.floor(Math.log10(raw));
  const step = ([1, 2, 5, 10].find((factor) => factor * power >= raw * 0.999) ?? 10) * power;
  return { step, digits: Math.max(0, Math.ceil(-Math.log10(step) - 1e-9)) };
}
