import { DomainError } from "~shared/errors/DomainError";

/** Throws a DomainError naming the argument unless it is a finite number; returns it otherwise. */
export function requireFinite(argument: string, value: number): number {
  if (!Number.isFinite(value)) throw new DomainError(argument, value, "a finite number");
  return value;
}

/** Throws a DomainError naming the argument unless it is finite and above zero; returns it otherwise. */
export function requirePositive(argument: string, value: number): number {
  if (!(value > 0) || value === Infinity) throw new DomainError(argument, value, "positive");
  return value;
}

/** Throws a DomainError naming the argument unless low ≤ value ≤ high; returns it otherwise. */
export function requireWithin(argument: string, value: number, low: number, high: number): number {
  if (!(value >= low && value <= high)) {
    throw new DomainError(argument, value, `from ${low} to ${high}`);
  }
  return value;
}

/** Throws a DomainError naming the argument unless 0 < value < 1; returns it otherwise. */
export function requireProbability(argument: string, value: number): number {
  if (!(value > 0 && value < 1)) throw new DomainError(argument, value, "between 0 and 1");
  return value;
}
