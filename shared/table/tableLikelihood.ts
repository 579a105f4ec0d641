/** A fitting table as its likelihood takes it: plain data that survives JSON, a worker's message and the years. */
import { rowLikelihood, type RowOptions } from "~shared/likelihood";
import type { ReadyRow, TableSpec } from "~shared/likelihood/compile";
import type { MethodFamily } from "~shared/methods/vocabulary";
import type { AsUsed } from "~shared/statement/asUsed";

/** A row that is in the table. */
export interface LikelihoodRow {
  /** FL-0042 */
  readonly number: string;
  /** FL-0042.3 */
  readonly quotable: string;
  /** Tarrowin et al. 2025 */
  readonly label: string;
  readonly citationKey: string;
  readonly families: readonly MethodFamily[];
  readonly used: AsUsed;
  readonly options: RowOptions;
}

/** Rows in a table and how they hang together. */
export interface TableLikelihood {
  readonly rows: readonly LikelihoodRow[];
  /** Alternatives that enter as one equal mixture. */
  readonly mixtures: readonly { readonly label: string; readonly members: readonly string[] }[];
  /** Members in the table with their correlation matrix, [m, m]. */
  readonly sets: readonly {
    readonly id: string;
    readonly label: string;
    readonly members: readonly string[];
    readonly rho: readonly (readonly number[])[];
  }[];
}

/**
 * What the engine takes of a table. A mixture's id is its first member's number with a plus behind it, as in
 * tableSpecOf.
 *
 * @throws {TypeError} If a row has no likelihood: a saved table never holds such a row.
 */
export function specOf({ rows, mixtures, sets }: TableLikelihood): TableSpec {
  return {
    rows: rows.map(readyRow),
    mixtures: mixtures.map(({ members }) => ({ id: `${members[0]}+`, members })),
    correlated: sets.map(({ id, members, rho }) => ({ id, members, rho })),
  };
}

function readyRow({ number, used, options }: LikelihoodRow): ReadyRow {
  const likelihood = rowLikelihood(used, options);
  if ("leftOut" in likelihood) throw new TypeError(`${number}: ${likelihood.leftOut}`);
  return { ...likelihood, id: number };
}

/**
 * A table without some of its rows: mixtures and sets shrink with them, a set by its exact marginal (rows and
 * columns dropped), and what has one member left stands for itself.
 */
export function withRows(
  { rows, mixtures, sets }: TableLikelihood,
  keep: (row: LikelihoodRow) => boolean,
): TableLikelihood {
  const kept = rows.filter(keep);
  const numbers = new Set(kept.map(({ number }) => number));
  return {
    rows: kept,
    mixtures: mixtures
      .map(({ label, members }) => ({ label, members: members.filter((one) => numbers.has(one)) }))
      .filter(({ members }) => members.length > 1),
    sets: sets
      .map(({ id, label, members, rho }) => {
        const at = members.flatMap((one, index) => (numbers.has(one) ? [index] : []));
        return {
          id,
          label,
          members: at.map((index) => members[index]!),
          rho: at.map((i) => at.map((j) => rho[i]![j]!)),
        };
      })
      .filter(({ members }) => members.length > 1),
  };
}
