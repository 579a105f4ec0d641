import type { EntityManager } from "typeorm";

import { anchorsInside, type Anchor } from "./anchors";
import { verifyChain } from "./eventLog";

export interface LogReport {
  holds: boolean;
  /** What was found, a sentence a line; the first one is the verdict. */
  lines: string[];
}

const NAMED_HEADS = 12;

/**
 * Proves the event log: the chain itself, and every head of it that is known outside the chain.
 * A chain that was cut, or made anew from some event on, is whole in itself; only a head that
 * somebody else kept can tell.
 *
 * @param brought - Heads from outside the database, of backups say; releases and tables are asked here.
 */
export async function verifyLog(
  manager: EntityManager,
  brought: readonly Anchor[],
): Promise<LogReport> {
  // Asked before the walk: what is kept by then the walk must meet.
  const anchors = [...brought, ...(await anchorsInside(manager))].sort(
    (a, b) => a.sequence - b.sequence,
  );
  const wanted = new Set(anchors.map((anchor) => anchor.sequence));
  const digests = new Map<number, string>();
  let last = 0;
  const chain = await verifyChain(manager, (sequence, digest) => {
    last = sequence;
    if (wanted.has(sequence)) digests.set(sequence, digest);
  });

  const broken = chain.intact ? null : chain.sequence;
  const lines: string[] = [];
  if (!chain.intact) lines.push(`Event ${chain.sequence}: ${chain.reason}.`);

  const agreeing: Anchor[] = [];
  for (const anchor of anchors) {
    const found = digests.get(anchor.sequence);
    if (found === anchor.digest) agreeing.push(anchor);
    else if (found !== undefined) lines.push(remade(anchor, agreeing.at(-1)?.sequence ?? 0));
    else if (broken === null) lines.push(cutOff(anchor, last));
    // Beyond a break nothing can be compared; the break itself is said.
  }
  const holds = lines.length === 0;
  lines.unshift(
    holds
      ? `The event log holds: ${last} ${last === 1 ? "event" : "events"}, each naming the one before it.`
      : "The event log does not hold.",
  );
  lines.push(...headWords(anchors.length, agreeing, last, holds));
  return { holds, lines };
}

function remade({ source, sequence }: Anchor, lastAgreed: number): string {
  const from = lastAgreed + 1;
  const which = from >= sequence ? "it was" : `one of the events ${from} to ${sequence} was`;
  return (
    `Event ${sequence}: it is not the one that ${source} keeps; ` +
    `${which} changed, and the chain made anew from there.`
  );
}

function cutOff({ source, sequence }: Anchor, last: number): string {
  const gone =
    sequence === last + 1
      ? "the event is gone"
      : `the event and all that followed, up to event ${sequence} at least, are gone`;
  return `Event ${last + 1}: ${gone}; ${source} keeps event ${sequence} as the last, and the log ends at event ${last}.`;
}

function headWords(
  known: number,
  agreeing: readonly Anchor[],
  last: number,
  holds: boolean,
): string[] {
  if (known === 0) {
    return last === 0
      ? []
      : [
          "No head of it is kept outside the chain, so a log made anew could not be told from the " +
            "true one: make a backup, or cut a release.",
        ];
  }
  const named = agreeing
    .slice(-NAMED_HEADS)
    .map(({ source, sequence }) => `${source} (event ${sequence})`);
  const more = agreeing.length - named.length;
  const words = [
    `${agreeing.length} of ${known} heads kept elsewhere agree` +
      (named.length > 0 ? `: ${named.join(", ")}${more > 0 ? ` and ${more} older` : ""}.` : "."),
  ];
  const newest = agreeing.at(-1)?.sequence ?? 0;
  if (holds && newest < last) {
    words.push(`After event ${newest} only the chain itself vouches for the log.`);
  }
  return words;
}
