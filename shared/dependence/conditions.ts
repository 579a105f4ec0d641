/** What a record is conditioned on, followed through other records to kinds of data. */
import { formatRecordNumber, parseRecordNumber } from "~shared/identifiers/recordNumber";
import { CONDITION_KINDS, type ConditionKind } from "~shared/statement/fields";
import { conditionWord } from "~shared/statement/words";

/** One way from a record to something it is conditioned on. */
export interface ConditionChain {
  /** Numbers of the records on the way, the record itself first; at least one. */
  readonly through: readonly string[];
  /** Kind of data, or the number of the record, at its end. */
  readonly on: ConditionKind | string;
}

function isKind(condition: string): condition is ConditionKind {
  return (CONDITION_KINDS as readonly string[]).includes(condition);
}

/** Conditions in the one spelling of each; what is neither a number nor a kind of data is left out. */
export function conditionsIn(conditionedOn: readonly string[]): string[] {
  const words = conditionedOn.flatMap((condition) => {
    if (isKind(condition)) return [condition];
    const number = parseRecordNumber(condition);
    return number === null ? [] : [formatRecordNumber(number)];
  });
  return [...new Set(words)];
}

/**
 * Everything a record is conditioned on, directly or through others. Each kind of data and each
 * record is reached by a shortest way; a record that another way already passes through has none of
 * its own. A circle, which the registry refuses, is walked once.
 *
 * @param number - FL-0042
 * @param conditionsOf - What a record names as its conditions; nothing for one that is not known.
 * @returns Kinds of data first, then records, each in the order in which they were reached.
 */
export function conditionChains(
  number: string,
  conditionsOf: (number: string) => readonly string[] | undefined,
): ConditionChain[] {
  const ways = new Map<string, readonly string[]>([[number, [number]]]);
  const kinds = new Map<string, ConditionChain>();
  const waiting = [number];
  for (const place of waiting) {
    const way = ways.get(place) ?? [place];
    for (const condition of conditionsOf(place) ?? []) {
      if (isKind(condition)) {
        if (!kinds.has(condition)) kinds.set(condition, { through: way, on: condition });
      } else if (!ways.has(condition)) {
        ways.set(condition, [...way, condition]);
        waiting.push(condition);
      }
    }
  }
  const chains = [...kinds.values()];
  const passed = new Set(chains.flatMap(({ through }) => through));
  // The farthest first: a longer way passes through the nearer records.
  for (const end of [...waiting].reverse()) {
    if (end === number || passed.has(end)) continue;
    const through = (ways.get(end) ?? []).slice(0, -1);
    chains.push({ through, on: end });
    for (const one of [...through, end]) passed.add(one);
  }
  return [
    ...chains.slice(0, kinds.size),
    ...chains.slice(kinds.size).sort((a, b) => waiting.indexOf(a.on) - waiting.indexOf(b.on)),
  ];
}

/** "FL-0007 is conditioned on FL-0003, which is conditioned on a CMB prior"; no full stop. */
export function conditionChainWords({ through, on }: ConditionChain): string {
  const [first = "", ...rest] = [...through, conditionWord(on)];
  return rest.reduce(
    (words, step, index) => `${words}${index === 0 ? "" : ", which"} is conditioned on ${step}`,
    first,
  );
}
