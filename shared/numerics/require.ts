import { DomainError } from "~shared/errors/DomainError";

/**
 * A finite number, or a refusal that names it.
 *
 * @returns The value itself; any unit.
 * @throws {DomainError} If it is infinite or not a number.
 */
export function requireFinite(argument: string, value: number): number {
  if (!Number.isFinite(value)) throw new DomainError(argument, value, "a finite number");
  return value;
}

/**
 * A finite number above zero, or a refusal that names it.
 *
 * @returns The value itself; any unit.
 * @throws {DomainError} If it is zero, negative, infinite or not a number.
 */
export function requirePositive(argument: string, value: number): number {
  if (!(value > 0) || value === Infinity) throw new DomainError(argument, value, "positive");
  return value;
}

/**
 * A number with low ≤ value ≤ high, or a refusal that names it.
 *
 * @returns The value itself; any unit.
 * @throws {DomainError} If it lies outside or is not a number.
 */
export function requireWithin(argument: string, value: number, low: number, high: number): number {
  if (!(value >= low && value <= high)) {
    throw new DomainError(argument, value, `from ${low} to ${high}`);
  }
  return value;
}

/**
 * A number strictly between 0 and 1, or a refusal that names it.
 *
 * @returns The value itself.
 * @throws {DomainError} If it lies outside or is not a number.
 */
export function requireProbability(argument: string, value: number): number {
  if (!(value > 0 && value < 1)) throw new DomainError(argument, value, "between 0 and 1");
  return value;
}
