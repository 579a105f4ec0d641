/** A malformed argument: names it, its value and what was required. */
export class DomainError extends RangeError {
  override readonly name = "DomainError";

  constructor(
    readonly argument: string,
    readonly value: unknown,
    requirement: string,
  ) {
    super(`${argument} must be ${requirement}, got ${String(value)}`);
  }
}
