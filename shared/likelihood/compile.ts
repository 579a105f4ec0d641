import { DomainError } from "~shared/errors/DomainError";
import { correlatedSet, quadraticForm } from "~shared/likelihood/correlatedSet";
import { addMinus2LnL, KERNEL, minus2LnLOf, tabulatedStep } from "~shared/likelihood/kernel";
import { mixtureMinus2LnL, type MixtureMember, mixtureOf } from "~shared/likelihood/mixture";
import type { ModelRequest } from "~shared/likelihood/modelRequest";
import { gaussLegendre } from "~shared/numerics/quadrature";

// Taken once: in a sandboxed realm every look-up of a global costs more than the arithmetic.
const { exp, log, log10, max } = Math;

/** A row ready for a fit; a RowLikelihood with its id is one. */
export interface ReadyRow extends MixtureMember {
  readonly id: string;
}

/** Rows and how they hang together; a row that no group names stands for itself. */
export interface TableSpec {
  readonly rows: readonly ReadyRow[];
  /** Alternatives that enter as one equal mixture. */
  readonly mixtures?: readonly { readonly id: string; readonly members: readonly string[] }[];
  /** Two-sided values with their correlation matrix, in the order of the members. */
  readonly correlated?: readonly {
    readonly id: string;
    readonly members: readonly string[];
    readonly rho: readonly (readonly number[])[];
  }[];
}

/** One factor of the likelihood: a row, a mixture or a correlated set. */
export interface TableTerm {
  readonly id: string;
  readonly kind: "row" | "mixture" | "correlated";
  readonly members: readonly string[];
}

/**
 * Everything a table asks of a history, without repeats. A family answers into one array, in this order:
 * points, bins, depths, fractions, durations.
 */
export interface ModelRequests {
  /** Redshifts where x is wanted, [p]. */
  readonly points: Float64Array;
  /** Bins whose mean x is wanted: low and high ends, [b] each. */
  readonly binLows: Float64Array;
  readonly binHighs: Float64Array;
  /** Optical depths: low and high redshifts, [d] each. */
  readonly depthLows: Float64Array;
  readonly depthHighs: Float64Array;
  /** Fractions whose redshift is wanted, [f]. */
  readonly fractions: Float64Array;
  readonly durations: readonly {
    readonly f1: number;
    readonly f2: number;
    readonly myr: boolean;
  }[];
  /** p + b + d + f + number of durations. */
  readonly size: number;
}

/** Redshift nodes of a row whose likelihood is averaged: enough for steps of Δz 0.1 over a unit bin. */
const AVERAGE_PANELS = 8;
const AVERAGE_ORDER = 8;
const AVERAGE_NODES = AVERAGE_PANELS * AVERAGE_ORDER;

/**
 * A table of rows as typed arrays: built once, then evaluated without allocation.
 * Rows are taken as independent beyond the groups that are given: ln L = Σ ln L_i, an assumption.
 */
export class CompiledTable {
  readonly requests: ModelRequests;
  readonly terms: readonly TableTerm[];
  /** Ids of all rows, in the order of `rowValues`. */
  readonly rowIds: readonly string[];

  private readonly kernels: Uint8Array;
  private readonly inLog: Uint8Array;
  private readonly offsets: Int32Array;
  private readonly slots: Int32Array;
  /** 0 for a plain row, else the number of redshift nodes its likelihood is averaged over. */
  private readonly averaged: Int32Array;
  private readonly packed: Float64Array;
  private readonly averageWeights: Float64Array;
  /** How many leading rows are plain and stand for themselves. */
  private readonly plain: number;
  private readonly groups: readonly Group[];
  private readonly scratch: Float64Array;
  private readonly termScratch: Float64Array;

  /** @throws {DomainError} If a group names a row that is missing, taken, or can't be part of it. */
  constructor(spec: TableSpec) {
    const { rows, groups, terms } = arrange(spec);
    this.rowIds = rows.map(({ id }) => id);
    this.groups = groups;
    this.terms = terms;
    this.plain = terms.findIndex(({ kind }) => kind !== "row");
    if (this.plain < 0) this.plain = terms.length;

    const builder = new RequestBuilder();
    const n = rows.length;
    this.kernels = Uint8Array.from(rows, ({ shape }) => shape.kernel);
    this.inLog = Uint8Array.from(rows, ({ evaluatedIn }) => (evaluatedIn === "log10" ? 1 : 0));
    this.averaged = Int32Array.from(rows, ({ request }) =>
      request.kind === "averaged" ? AVERAGE_NODES : 0,
    );
    this.offsets = new Int32Array(n);
    let length = 0;
    rows.forEach(({ shape }, i) => {
      this.offsets[i] = length;
      length += shape.packed.length;
    });
    this.packed = new Float64Array(length);
    rows.forEach(({ shape }, i) => this.packed.set(shape.packed, this.offsets[i]!));
    const wanted = rows.map(({ request }) => builder.add(request));
    this.requests = builder.finish();
    this.slots = Int32Array.from(wanted, (slot) => slot());
    const rule = gaussLegendre(AVERAGE_ORDER);
    this.averageWeights = Float64Array.from(
      { length: AVERAGE_NODES },
      (_, i) => rule.weights[i % AVERAGE_ORDER]! / (2 * AVERAGE_PANELS),
    );
    this.scratch = new Float64Array(AVERAGE_NODES);
    this.termScratch = new Float64Array(max(1, ...groups.map(({ count }) => count)));
  }

  /**
   * −2 ln L of the table, relative to its terms' peaks.
   *
   * @param values - The history's answers, laid out as `requests` says, [requests.size]; NaN where
   *   it has none, which excludes the history.
   * @returns A number ≥ 0 up to rounding, or +Infinity; never NaN.
   */
  evaluate(values: Float64Array): number {
    const { kernels, slots, offsets, packed, plain } = this;
    let total = 0;
    for (let i = 0; i < plain; i++) {
      if (this.averaged[i] !== 0 || this.inLog[i] !== 0) {
        total += this.rowValue(i, values);
        continue;
      }
      const x = values[slots[i]!]!;
      // NaN: the history has no such value and is excluded.
      if (x !== x) return Infinity;
      if (kernels[i] === KERNEL.twoPiece) {
        const at = offsets[i]!;
        const d = x - packed[at]!;
        const t = d < 0 ? d * packed[at + 1]! : d * packed[at + 2]!;
        total += t * t;
      } else if (kernels[i] === KERNEL.smoothedStep) {
        const at = offsets[i]!;
        total += tabulatedStep((x - packed[at]!) * packed[at + 1]!);
      } else {
        total += minus2LnLOf(kernels[i]!, packed, offsets[i]!, x);
      }
    }
    for (const group of this.groups) total += this.groupValue(group, values);
    return total;
  }

  /**
   * −2 ln L for a line of histories at once.
   *
   * @param values - The histories' answers, [requests.size, n]: all of one request stand together.
   * @param n - How many histories.
   * @param out - Filled with what `evaluate` gives for each, [n].
   */
  evaluateLine(values: Float64Array, n: number, out: Float64Array): void {
    const { kernels, slots, offsets, packed, requests } = this;
    // A history always has an x, a bin mean and a depth; further down it may have no value.
    const alwaysThere =
      requests.points.length + requests.binLows.length + requests.depthLows.length;
    out.fill(0, 0, n);
    for (let i = 0; i < this.plain; i++) {
      if (this.averaged[i] === 0 && this.inLog[i] === 0 && slots[i]! < alwaysThere) {
        addMinus2LnL(kernels[i]!, packed, offsets[i]!, values, slots[i]! * n, n, out);
      } else {
        for (let j = 0; j < n; j++) out[j]! += this.rowValue(i, values, n, j);
      }
    }
    for (const group of this.groups) {
      for (let j = 0; j < n; j++) out[j]! += this.groupValue(group, values, n, j);
    }
  }

  /**
   * −2 ln L of each term, in the order of `terms`.
   *
   * @param values - As for `evaluate`.
   * @param out - Filled, [terms.length].
   */
  termValues(values: Float64Array, out: Float64Array): void {
    for (let i = 0; i < this.plain; i++) out[i] = this.rowValue(i, values);
    this.groups.forEach((group, g) => {
      out[this.plain + g] = this.groupValue(group, values);
    });
  }

  /** The model value each row is held against, or NaN; [rows] in the order of `rowIds`. */
  modelValues(values: Float64Array): Float64Array {
    return Float64Array.from(this.rowIds, (_, i) => {
      if (this.averaged[i] === 0) return values[this.slots[i]!]!;
      // Shown for an averaged row: the mean of x over its redshift.
      let mean = 0;
      for (let k = 0; k < AVERAGE_NODES; k++) {
        mean += this.averageWeights[k]! * values[this.slots[i]! + k]!;
      }
      return mean;
    });
  }

  /** Answers stand `stride` apart, those of one history from `column` on: 1 and 0 for a single one. */
  private rowValue(i: number, values: Float64Array, stride = 1, column = 0): number {
    const slot = this.slots[i]!;
    const count = this.averaged[i]!;
    if (count === 0) return this.kernelValue(i, values[slot * stride + column]!);
    let least = Infinity;
    for (let k = 0; k < count; k++) {
      const value = this.kernelValue(i, values[(slot + k) * stride + column]!);
      this.scratch[k] = value;
      if (value < least) least = value;
    }
    if (least === Infinity) return Infinity;
    let sum = 0;
    for (let k = 0; k < count; k++) {
      sum += this.averageWeights[k]! * exp(-0.5 * (this.scratch[k]! - least));
    }
    return least - 2 * log(sum);
  }

  private kernelValue(i: number, model: number): number {
    const x = this.inLog[i] === 0 ? model : log10(model);
    if (Number.isNaN(x)) return Infinity;
    return minus2LnLOf(this.kernels[i]!, this.packed, this.offsets[i]!, x);
  }

  private groupValue(group: Group, values: Float64Array, stride = 1, column = 0): number {
    const { first, count } = group;
    const scratch = this.termScratch;
    if (group.kind === "mixture") {
      for (let k = 0; k < count; k++) {
        scratch[k] = this.rowValue(first + k, values, stride, column);
      }
      return mixtureMinus2LnL(group.numbers, 0, count, group.logPeak, scratch, 0);
    }
    for (let k = 0; k < count; k++) {
      const at = this.offsets[first + k]!;
      const model = values[this.slots[first + k]! * stride + column]!;
      const d = (this.inLog[first + k] === 0 ? model : log10(model)) - this.packed[at]!;
      if (Number.isNaN(d)) return Infinity;
      scratch[k] = d < 0 ? d * this.packed[at + 1]! : d * this.packed[at + 2]!;
    }
    return quadraticForm(group.numbers, 0, scratch, count);
  }
}

interface Group {
  readonly kind: "mixture" | "correlated";
  /** Its members are the rows first … first + count − 1. */
  readonly first: number;
  readonly count: number;
  /** Log weights of a mixture, [count]; inverse correlation of a set, [count, count]. */
  readonly numbers: Float64Array;
  readonly logPeak: number;
}

/** Rows that stand for themselves first, then the members of each group together. */
function arrange(spec: TableSpec): {
  rows: ReadyRow[];
  groups: Group[];
  terms: TableTerm[];
} {
  const byId = new Map<string, ReadyRow>();
  for (const row of spec.rows) {
    if (byId.has(row.id)) throw new DomainError("rows", row.id, "named once");
    byId.set(row.id, row);
  }
  const wanted = [
    ...(spec.mixtures ?? []).map((group) => ({ ...group, kind: "mixture" as const })),
    ...(spec.correlated ?? []).map((group) => ({ ...group, kind: "correlated" as const })),
  ];
  const taken = new Set<string>();
  for (const group of wanted) {
    for (const id of group.members) {
      if (!byId.has(id))
        throw new DomainError(`group ${group.id}`, id, "made of rows of the table");
      if (taken.has(id))
        throw new DomainError(`group ${group.id}`, id, "of rows in no other group");
      taken.add(id);
    }
  }
  const alone = spec.rows.filter(({ id }) => !taken.has(id));
  const rows = [...alone];
  const terms: TableTerm[] = alone.map(({ id }) => ({ id, kind: "row", members: [id] }));
  const groups: Group[] = [];
  for (const group of wanted) {
    const members = group.members.map((id) => byId.get(id)!);
    const common = { first: rows.length, count: members.length };
    if (group.kind === "mixture") {
      const mixture = mixtureOf(members);
      groups.push({
        kind: "mixture",
        ...common,
        numbers: mixture.logWeights,
        logPeak: mixture.logPeak,
      });
    } else {
      for (const { id, shape, request } of members) {
        // Limits and curves have no residual in sigma, and an averaged likelihood has many.
        if (
          shape.kernel !== KERNEL.twoPiece ||
          shape.name.startsWith("half") ||
          request.kind === "averaged"
        ) {
          throw new DomainError(
            `group ${group.id}`,
            id,
            "made of two-sided values in two-piece form",
          );
        }
      }
      if (group.rho.length !== members.length) {
        throw new DomainError(
          `group ${group.id}`,
          `${group.rho.length} rows`,
          "as large as its matrix",
        );
      }
      groups.push({
        kind: "correlated",
        ...common,
        numbers: correlatedSet(group.rho).inverse,
        logPeak: 0,
      });
    }
    rows.push(...members);
    terms.push({ id: group.id, kind: group.kind, members: group.members });
  }
  return { rows, groups, terms };
}

/** Collects what rows ask; a slot is known once all have asked. */
class RequestBuilder {
  private readonly points: number[] = [];
  private readonly bins: [number, number][] = [];
  private readonly depths: [number, number][] = [];
  private readonly fractions: number[] = [];
  private readonly durations: { f1: number; f2: number; myr: boolean }[] = [];

  add(request: ModelRequest): () => number {
    switch (request.kind) {
      case "point": {
        const at = indexOrPush(this.points, request.z, Object.is);
        return () => at;
      }
      case "averaged": {
        // Its nodes stand together, so that they are never shared with other points.
        const at = this.points.length;
        const { nodes } = gaussLegendre(AVERAGE_ORDER);
        const half = (request.zHigh - request.zLow) / AVERAGE_PANELS / 2;
        for (let p = 0; p < AVERAGE_PANELS; p++) {
          for (let i = 0; i < AVERAGE_ORDER; i++) {
            this.points.push(request.zLow + (2 * p + 1 + nodes[i]!) * half);
          }
        }
        return () => at;
      }
      case "binMean": {
        const at = indexOrPush(this.bins, [request.zLow, request.zHigh], samePair);
        return () => this.points.length + at;
      }
      case "opticalDepth": {
        const at = indexOrPush(this.depths, [request.z1, request.z2], samePair);
        return () => this.points.length + this.bins.length + at;
      }
      case "redshiftAtFraction": {
        const at = indexOrPush(this.fractions, request.f, Object.is);
        return () => this.points.length + this.bins.length + this.depths.length + at;
      }
      case "duration": {
        const { f1, f2, unit } = request;
        const at = this.durations.push({ f1, f2, myr: unit === "myr" }) - 1;
        return () =>
          this.points.length + this.bins.length + this.depths.length + this.fractions.length + at;
      }
    }
  }

  finish(): ModelRequests {
    return {
      points: Float64Array.from(this.points),
      binLows: Float64Array.from(this.bins, ([low]) => low),
      binHighs: Float64Array.from(this.bins, ([, high]) => high),
      depthLows: Float64Array.from(this.depths, ([low]) => low),
      depthHighs: Float64Array.from(this.depths, ([, high]) => high),
      fractions: Float64Array.from(this.fractions),
      durations: this.durations,
      size:
        this.points.length +
        this.bins.length +
        this.depths.length +
        this.fractions.length +
        this.durations.length,
    };
  }
}

function indexOrPush<T>(list: T[], value: T, same: (a: T, b: T) => boolean): number {
  const at = list.findIndex((known) => same(known, value));
  return at >= 0 ? at : list.push(value) - 1;
}

function samePair(a: readonly [number, number], b: readonly [number, number]): boolean {
  return a[0] === b[0] && a[1] === b[1];
}
