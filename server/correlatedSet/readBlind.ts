import { In, type EntityManager } from "typeorm";

import type { ViewerIdentity } from "~server/common/context";
import { setsReadBlind } from "~server/review/blindness";
import { formatSetNumber } from "~shared/identifiers/setNumber";

import { CorrelatedSet } from "./correlatedSet.entity";

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
