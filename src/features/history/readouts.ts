import type { Background } from "~shared/cosmology/background";
import type { History } from "~shared/history/history";

/** What a history says in numbers; definitions as in the engine. */
export interface Readout {
  opticalDepth: number;
  /** Optical depth from z = 15 to 30. */
  earlyDepth: number;
  midpoint: number | null;
  /** Age at the midpoint, Myr. */
  ageMyr: number | null;
  /** z(x = 0.75) − z(x = 0.25). */
  duration: number | null;
  durationMyr: number | null;
}

export function readoutOf(history: History, background: Background): Readout {
  const midpoint = history.redshiftAtFraction(0.5);
  return {
    opticalDepth: history.opticalDepth(background),
    earlyDepth: history.opticalDepth(background, 15, 30),
    midpoint,
    ageMyr: midpoint === null ? null : 1000 * background.age(midpoint),
    duration: history.duration(),
    durationMyr: history.durationMyr(background),
  };
}

/** A number to a fixed count of decimals with a true minus; what rounds to nothing says so. */
export function shownNumber(value: number | null, digits: number): string {
  if (value === null) return "none";
  if (value === Infinity) return "infinite";
  const smallest = 10 ** -digits;
  if (value > 0 && value < smallest) return `< ${smallest.toFixed(digits)}`;
  return value.toFixed(digits).replace("-", "−");
}
