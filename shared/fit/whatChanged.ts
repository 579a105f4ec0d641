import type { Task } from "~shared/inference";
import type { LikelihoodRow, TableLikelihood } from "~shared/table/tableLikelihood";

import { fitPosterior, type FitSetting } from "./posterior";
import type { AttributedChange, WhatChangedResult } from "./request";
import { comparable, largest, meansOf, part, type Shifts, shiftsBetween } from "./shifts";

type Mixture = TableLikelihood["mixtures"][number];
type Group = TableLikelihood["sets"][number];

/** One change on the way from a table to another, made to the first alone. */
interface Step {
  readonly number: string;
  readonly words: string;
  readonly table: TableLikelihood;
}

/** Attributes the difference between two tables to the rows that came, went or changed. */
export function* whatChanged(
  setting: FitSetting,
  before: TableLikelihood,
): Task<WhatChangedResult> {
  const after = setting.request.table;
  const effort = { coarse: true, evidence: false };
  const first = yield* fitPosterior(setting, before, effort);
  const last = yield* fitPosterior(setting, after, effort);
  const steps = stepsBetween(before, after);
  const changes: { change: AttributedChange; size: number }[] = [];
  for (const [index, { number, words, table }] of steps.entries()) {
    const fitted = yield* part(comparable(setting, table), "single changes", index, steps.length);
    const failed = "failed" in fitted ? fitted.failed : null;
    const shifts: Shifts | null = "failed" in fitted ? null : shiftsBetween(first, fitted);
    changes.push({
      change: {
        ...{ number, words, failed },
        midpointShift: shifts?.midpointShift ?? 0,
        tauShift: shifts?.tauShift ?? 0,
      },
      size: shifts ? largest(shifts) : -1,
    });
  }
  const rows = changes.sort((a, b) => b.size - a.size).map(({ change }) => change);
  const [then, now] = [meansOf(first), meansOf(last)];
  const whole = shiftsBetween(first, last);
  return {
    kind: "whatChanged",
    midpoint: [then.midpoint, now.midpoint],
    tau: [then.tau, now.tau],
    rows,
    midpointTogether: rows.reduce((rest, one) => rest - one.midpointShift, whole.midpointShift),
    tauTogether: rows.reduce((rest, one) => rest - one.tauShift, whole.tauShift),
  };
}

/** Single changes in the order of the rows before, then of those that came, then of mixtures and sets. */
export function stepsBetween(before: TableLikelihood, after: TableLikelihood): Step[] {
  const then = new Map(before.rows.map((row) => [row.number, row]));
  const now = new Map(after.rows.map((row) => [row.number, row]));
  const steps: Step[] = [];
  const moved = new Set<string>();
  for (const number of new Set([...then.keys(), ...now.keys()])) {
    const words = rowWords(then.get(number), now.get(number));
    if (words === null) continue;
    moved.add(number);
    steps.push({ number, words, table: withOneRow(before, after, number) });
  }
  return [...steps, ...groupSteps(before, after, moved)];
}

function rowWords(then: LikelihoodRow | undefined, now: LikelihoodRow | undefined): string | null {
  if (!then && now) return `${now.number} came in.`;
  if (then && !now) return `${then.number} went out.`;
  if (!then || !now) return null;
  if (!same(then.used, now.used)) {
    return then.quotable === now.quotable
      ? `${now.number} states something else.`
      : `${now.quotable} in place of ${then.quotable}.`;
  }
  return same(then.options, now.options) ? null : `${now.number} enters with another likelihood.`;
}

/** The table before with one row as it is after: in, out or other, with the mixture and set it has there. */
function withOneRow(
  before: TableLikelihood,
  after: TableLikelihood,
  number: string,
): TableLikelihood {
  const now = after.rows.find((row) => row.number === number);
  const kept = before.rows.filter((row) => row.number !== number);
  const at = before.rows.findIndex((row) => row.number === number);
  const rows = now ? kept.toSpliced(at < 0 ? kept.length : at, 0, now) : kept;
  const wasIn = before.rows.length !== kept.length;
  const present = new Set(rows.map((row) => row.number));
  // A row that comes brings its own mixture or set; what it takes from another one leaves that one.
  const brought = wasIn ? [] : [number];
  return { rows, ...groupsOf(before, after, present, brought) };
}

function groupsOf(
  before: TableLikelihood,
  after: TableLikelihood,
  present: ReadonlySet<string>,
  brought: readonly string[],
): Pick<TableLikelihood, "mixtures" | "sets"> {
  const bring = ({ members }: { readonly members: readonly string[] }): boolean =>
    members.some((one) => brought.includes(one));
  const mixtures = after.mixtures.filter(bring).map((one) => mixtureWithin(one, present));
  const sets = after.sets.filter(bring).map((one) => setWithin(one, present));
  const taken = new Set([...mixtures, ...sets].flatMap(({ members }) => members));
  const free = new Set([...present].filter((one) => !taken.has(one)));
  return {
    mixtures: [...before.mixtures.map((one) => mixtureWithin(one, free)), ...mixtures].filter(
      several,
    ),
    sets: [...before.sets.map((one) => setWithin(one, free)), ...sets].filter(several),
  };
}

function several({ members }: { readonly members: readonly string[] }): boolean {
  return members.length > 1;
}

function mixtureWithin({ label, members }: Mixture, present: ReadonlySet<string>): Mixture {
  return { label, members: members.filter((one) => present.has(one)) };
}

function setWithin({ id, label, members, rho }: Group, present: ReadonlySet<string>): Group {
  const at = members.flatMap((one, index) => (present.has(one) ? [index] : []));
  return {
    id,
    label,
    members: at.map((index) => members[index]!),
    rho: at.map((i) => at.map((j) => rho[i]![j]!)),
  };
}

/** Mixtures and sets that changed although none of their rows did. */
function groupSteps(
  before: TableLikelihood,
  after: TableLikelihood,
  moved: ReadonlySet<string>,
): Step[] {
  const settled = ({ members }: { readonly members: readonly string[] }): boolean =>
    !members.some((one) => moved.has(one));
  const steps: Step[] = [];
  const regroup = (
    mixtures: readonly Mixture[],
    sets: readonly Group[],
    own: readonly string[],
  ) => {
    const taken = new Set(own);
    const others = new Set(
      before.rows.map(({ number }) => number).filter((one) => !taken.has(one)),
    );
    return {
      rows: before.rows,
      mixtures: [...before.mixtures.map((one) => mixtureWithin(one, others)), ...mixtures].filter(
        several,
      ),
      sets: [...before.sets.map((one) => setWithin(one, others)), ...sets].filter(several),
    };
  };
  for (const set of after.sets.filter(settled)) {
    const was = before.sets.find(({ id }) => id === set.id);
    if (was && same(was.members, set.members) && same(was.rho, set.rho)) continue;
    steps.push({
      number: set.id,
      words: was ? `${set.id} has other correlations.` : `${set.id} is taken as correlated.`,
      table: regroup([], [set], set.members),
    });
  }
  for (const set of before.sets.filter(settled)) {
    if (after.sets.some(({ id }) => id === set.id)) continue;
    steps.push({
      number: set.id,
      words: `${set.id} is no longer taken as correlated.`,
      table: regroup([], [], set.members),
    });
  }
  for (const mixture of after.mixtures.filter(settled)) {
    if (before.mixtures.some(({ members }) => same(members, mixture.members))) continue;
    steps.push({
      number: mixture.members[0]!,
      words: `${mixture.members.join(", ")} enter as one mixture.`,
      table: regroup([mixture], [], mixture.members),
    });
  }
  for (const mixture of before.mixtures.filter(settled)) {
    if (after.mixtures.some(({ members }) => members.some((one) => mixture.members.includes(one))))
      continue;
    steps.push({
      number: mixture.members[0]!,
      words: `${mixture.members.join(", ")} no longer enter as one mixture.`,
      table: regroup([], [], mixture.members),
    });
  }
  return steps;
}

function same(a: unknown, b: unknown): boolean {
  return JSON.stringify(a) === JSON.stringify(b);
}
