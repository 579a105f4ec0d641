// Taken once: in a sandboxed realm every look-up of a global costs more than the arithmetic.
const { abs, floor, imul, log, sqrt } = Math;

/**
 * A seeded stream of random numbers, the same on every machine: xoshiro128**, started by splitmix32.
 * Our own because it is a dozen lines and a chain must be repeatable for as long as a table is kept.
 *
 * Source: Blackman & Vigna (2021), ACM TOMS 47, 36.
 */
export class RandomStream {
  private readonly state = new Uint32Array(4);
  private spare: number | null = null;

  /** @param seed - Any whole number; equal seeds give equal streams. */
  constructor(seed: number) {
    let mixed = seed >>> 0;
    // The high part of a large seed counts too.
    const high = floor(abs(seed) / 2 ** 32) >>> 0;
    for (let i = 0; i < 4; i++) {
      mixed = (mixed + 0x9e3779b9) >>> 0;
      let t = mixed ^ (i % 2 === 0 ? high : 0);
      t = imul(t ^ (t >>> 16), 0x21f0aaad);
      t = imul(t ^ (t >>> 15), 0x735a2d97);
      this.state[i] = (t ^ (t >>> 15)) >>> 0;
    }
  }

  /** Uniform in [0, 1), a multiple of 2⁻³²; enough for draws that a chain compares with densities. */
  uniform(): number {
    return this.word() * 2.3283064365386963e-10;
  }

  /** A whole number from 0 to n − 1. */
  below(n: number): number {
    return floor(this.uniform() * n);
  }

  /** Standard normal, by the polar method of Marsaglia & Bray (1964). */
  normal(): number {
    if (this.spare !== null) {
      const value = this.spare;
      this.spare = null;
      return value;
    }
    for (;;) {
      const a = 2 * this.uniform() - 1;
      const b = 2 * this.uniform() - 1;
      const s = a * a + b * b;
      if (s > 0 && s < 1) {
        const scale = sqrt((-2 * log(s)) / s);
        this.spare = b * scale;
        return a * scale;
      }
    }
  }

  private word(): number {
    const s = this.state;
    const x = imul(s[1]!, 5);
    const result = imul((x << 7) | (x >>> 25), 9) >>> 0;
    const t = s[1]! << 9;
    s[2]! ^= s[0]!;
    s[3]! ^= s[1]!;
    s[1]! ^= s[2]!;
    s[0]! ^= s[3]!;
    s[2]! ^= t;
    const u = s[3]!;
    s[3] = (u << 11) | (u >>> 21);
    return result;
  }
}
