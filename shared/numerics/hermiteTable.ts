const { floor } = Math;

/**
 * A function of one variable as cubics between even places, from its values and slopes: for functions
 * that a fit asks millions of times and whose library call costs more than all the rest.
 */
export class HermiteTable {
  /** Value and width × slope at each place, alternating. */
  private readonly numbers: Float64Array;

  /**
   * @param value - The function.
   * @param slope - Its derivative.
   * @param low - First place.
   * @param high - Last place; `value` below answers for low ≤ t < high only.
   * @param perUnit - Places per unit: the error is |f⁗|/(384 perUnit⁴) at most.
   */
  constructor(
    value: (t: number) => number,
    slope: (t: number) => number,
    readonly low: number,
    readonly high: number,
    private readonly perUnit: number,
  ) {
    const n = (high - low) * perUnit + 1;
    this.numbers = new Float64Array(2 * n);
    for (let i = 0; i < n; i++) {
      const t = low + i / perUnit;
      this.numbers[2 * i] = value(t);
      this.numbers[2 * i + 1] = slope(t) / perUnit;
    }
  }

  /** The function at t, low ≤ t < high (not checked). */
  at(t: number): number {
    const { numbers } = this;
    const place = (t - this.low) * this.perUnit;
    const cell = floor(place);
    const s = place - cell;
    const i = 2 * cell;
    const v = numbers[i]!;
    const d0 = numbers[i + 1]!;
    const rise = numbers[i + 2]! - v;
    const d1 = numbers[i + 3]!;
    return v + s * (d0 + s * (3 * rise - 2 * d0 - d1 + s * (d0 + d1 - 2 * rise)));
  }
}
