import { DomainError } from "~shared/errors/DomainError";

// Taken once: in a sandboxed realm every look-up of a global costs more than the arithmetic.
const { cos, min } = Math;

/**
 * A smooth function on [start, start + panels × width], kept as one polynomial per panel, with
 * its integral between any two places. Building samples the function once; afterwards a value costs
 * nanoseconds, and an integral over any range costs two polynomials.
 */
export class PiecewiseSeries {
  readonly end: number;
  private readonly coefficients: Float64Array;
  private readonly antiderivative: Float64Array;
  /** Integral from the start of panel i to the end of all: keeps the digits of decaying tails. */
  private readonly suffix: Float64Array;

  /**
   * @param f - The function; must be smooth well beyond the scale of a panel.
   * @param start - Left end.
   * @param width - Width of a panel, positive.
   * @param panels - Number of panels.
   * @param degree - Degree of the polynomial in each panel.
   */
  constructor(
    f: (u: number) => number,
    readonly start: number,
    private readonly width: number,
    private readonly panels: number,
    private readonly degree: number,
  ) {
    const n = degree + 1;
    this.end = start + panels * width;
    this.coefficients = new Float64Array(panels * n);
    this.antiderivative = new Float64Array(panels * (n + 1));
    this.suffix = new Float64Array(panels + 1);
    const toMonomial = chebyshevToMonomial(degree);
    const samples = new Float64Array(n);
    const series = new Float64Array(n);
    for (let p = 0; p < panels; p++) {
      const centre = start + (p + 0.5) * width;
      for (let j = 0; j < n; j++) {
        samples[j] = f(centre + 0.5 * width * cos((Math.PI * (j + 0.5)) / n));
      }
      for (let k = 0; k < n; k++) {
        let sum = 0;
        for (let j = 0; j < n; j++) sum += samples[j]! * cos((Math.PI * k * (j + 0.5)) / n);
        series[k] = ((k === 0 ? 1 : 2) * sum) / n;
      }
      for (let i = 0; i < n; i++) {
        let sum = 0;
        for (let k = i; k < n; k++) sum += series[k]! * toMonomial[k * n + i]!;
        this.coefficients[p * n + i] = sum;
        this.antiderivative[p * (n + 1) + i + 1] = (0.5 * width * sum) / (i + 1);
      }
      // Constant of integration: zero at the panel's left end, t = −1.
      let atLeft = 0;
      for (let i = n; i >= 1; i--) atLeft = -(atLeft + this.antiderivative[p * (n + 1) + i]!);
      this.antiderivative[p * (n + 1)] = -atLeft;
    }
    for (let p = panels - 1; p >= 0; p--) {
      this.suffix[p] = this.suffix[p + 1]! + this.primitive(p, 1);
    }
  }

  /** The function at u; u must lie in the range (not checked: this runs in the innermost loops). */
  value(u: number): number {
    const scaled = (u - this.start) / this.width;
    const p = min(scaled | 0, this.panels - 1);
    const t = 2 * (scaled - p) - 1;
    const n = this.degree + 1;
    const base = p * n;
    let sum = this.coefficients[base + n - 1]!;
    for (let i = base + n - 2; i >= base; i--) sum = sum * t + this.coefficients[i]!;
    return sum;
  }

  /**
   * Integral from a to b (a ≤ b).
   *
   * @throws {DomainError} If the ends are not ordered inside the range.
   */
  integral(a: number, b: number): number {
    if (!(a >= this.start && b <= this.end && a <= b)) {
      throw new DomainError("range", `[${a}, ${b}]`, `ordered inside ${this.start} to ${this.end}`);
    }
    const pa = min(((a - this.start) / this.width) | 0, this.panels - 1);
    const pb = min(((b - this.start) / this.width) | 0, this.panels - 1);
    const ta = 2 * ((a - this.start) / this.width - pa) - 1;
    const tb = 2 * ((b - this.start) / this.width - pb) - 1;
    if (pa === pb) return this.primitive(pa, tb) - this.primitive(pa, ta);
    return (
      this.primitive(pa, 1) -
      this.primitive(pa, ta) +
      (this.suffix[pa + 1]! - this.suffix[pb]!) +
      this.primitive(pb, tb)
    );
  }

  private primitive(p: number, t: number): number {
    const n = this.degree + 2;
    const base = p * n;
    let sum = this.antiderivative[base + n - 1]!;
    for (let i = base + n - 2; i >= base; i--) sum = sum * t + this.antiderivative[i]!;
    return sum;
  }
}

/** Row k holds the monomial coefficients of the Chebyshev polynomial of degree k; [degree+1, degree+1]. */
function chebyshevToMonomial(degree: number): Float64Array {
  const n = degree + 1;
  const table = new Float64Array(n * n);
  table[0] = 1;
  if (degree >= 1) table[n + 1] = 1;
  for (let k = 2; k < n; k++) {
    for (let i = 0; i < n; i++) {
      const shifted = i > 0 ? 2 * table[(k - 1) * n + i - 1]! : 0;
      table[k * n + i] = shifted - table[(k - 2) * n + i]!;
    }
  }
  return table;
}
