import { In, type EntityManager } from "typeorm";

import type { ViewerIdentity } from "~server/common/context";
import type { Asking } from "~server/constraint/constraint.query";
import { seesSet, setsReadBlind } from "~server/review/blindness";
import { correlations, usedCorrelations } from "~shared/correlatedSet/matrix";
import { formatSetNumber } from "~shared/identifiers/setNumber";

import { CorrelatedSet } from "./correlatedSet.entity";
import { membersFor } from "./store";

/** A set in use as a fitting table takes it. */
export interface UsedSet {
  /** FLS-0003 */
  id: string;
  label: string;
  /** Record numbers, [n]. */
  members: string[];
  /** Correlation matrix as used, [n, n]. */
  rho: number[][];
}

/**
 * Sets in use that hold any of these records, as far as this person may see them. A set whose
 * records are not all in use any more (one was withdrawn) is left out.
 *
 * @param numbers - Record numbers (FL-0042); null for every set.
 */
export async function setsInUse(
  ctx: Asking,
  numbers: readonly string[] | null = null,
): Promise<UsedSet[]> {
  const { manager } = ctx.database;
  const wanted = numbers && new Set(numbers);
  const sets = await manager.find(CorrelatedSet, {
    where: { state: "approved" },
    order: { id: "ASC" },
  });
  const now = new Date();
  const used: UsedSet[] = [];
  for (const set of sets) {
    if (wanted && !set.members.some((number) => wanted.has(number))) continue;
    if (!(await seesSet(manager, ctx.viewer, set, now))) continue;
    const found = await membersFor(manager, ctx.viewer, set.members);
    const byNumber = new Map(found.map((member) => [member.number, member]));
    const members = set.members.flatMap((number) => byNumber.get(number) ?? []);
    const rho = correlations(set, set.members.length);
    if (rho === null || members.length !== set.members.length) continue;
    used.push({
      id: formatSetNumber(set.id),
      label: set.label ?? formatSetNumber(set.id),
      members: set.members,
      rho: usedCorrelations(rho, members),
    });
  }
  return used;
}

/**
 * Numbers of sets that this person must not see now, since they are reading a later set of the same
 * chain blind; for tables and releases, which hold sets by number.
 */
export async function setNumbersReadBlind(
  manager: EntityManager,
  viewer: ViewerIdentity | null,
  now: Date,
): Promise<Set<string>> {
  const chains = await setsReadBlind(manager, viewer, now);
  if (chains.size === 0) return new Set();
  const sets = await manager.find(CorrelatedSet, {
    select: { id: true },
    where: { chainId: In([...chains]) },
  });
  return new Set(sets.map(({ id }) => formatSetNumber(id)));
}
