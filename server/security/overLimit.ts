import { createHash } from "node:crypto";

import type { RequestContext } from "~server/common/context";
import { tooManySentence } from "~server/common/errors";
import { refuse, type Refusal } from "~server/common/outcomes";

import type { LimitName } from "./rateLimits";

/** Counters keep digests, so that the table of limits is no list of who comes here. */
export function limitKey(text: string): string {
  return createHash("sha256").update(text, "utf8").digest("base64url");
}

/** Counts one against each limit; a refusal when any of them is used up. */
export async function overLimit(
  ctx: Pick<RequestContext, "limits">,
  counts: readonly (readonly [name: LimitName, key: string])[],
): Promise<Refusal | null> {
  const waits = await Promise.all(
    counts.map(([name, key]) => ctx.limits[name].take(limitKey(key))),
  );
  const wait = Math.max(...waits);
  return wait > 0 ? refuse("TOO_MANY_REQUESTS", tooManySentence(wait)) : null;
}
