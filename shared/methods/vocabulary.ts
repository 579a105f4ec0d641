/** The method vocabulary: families drive marker and filter; a tag belongs to exactly one family. */
import { START_VOCABULARY } from "./startVocabulary";

export const METHOD_FAMILIES = [
  "dampingWing",
  "darkPixels",
  "forestOpacity",
  "luminosityFunction",
  "lineStrength",
  "emitterClustering",
  "twentyOneCm",
  "cmb",
  "other",
] as const;
export type MethodFamily = (typeof METHOD_FAMILIES)[number];

export const FAMILY_NAMES: Record<MethodFamily, string> = {
  dampingWing: "Damping wing",
  darkPixels: "Dark pixels",
  forestOpacity: "Forest opacity",
  luminosityFunction: "Lyα luminosity function",
  lineStrength: "Lyα line strength",
  emitterClustering: "Emitter clustering",
  twentyOneCm: "21-cm signal",
  cmb: "CMB",
  other: "Other",
};

export interface MethodTag {
  /** camelCase, never changed: records carry it. */
  tag: string;
  family: MethodFamily;
  name: string;
  /** One line. */
  definition: string;
  /** The usual systematic, shown as a caution on the record. */
  caution: string;
  /** Other spellings met in hand-kept lists; matched without case or punctuation. */
  aliases: readonly string[];
  /** Whether its results contain or assume others, so that they never count beside them as independent. */
  neverIndependent: boolean;
  /** The tag that took this one over; null while it is in use. */
  retiredInto: string | null;
}

// ---- The vocabulary in force

/*
 * Maintainers change the vocabulary while the program runs, and nearly everything reads it: so it stands
 * here once. The server sets it from the database before it answers a request, the client from the first
 * answer it gets.
 */
interface InForce {
  all: readonly MethodTag[];
  inUse: readonly MethodTag[];
  byTag: ReadonlyMap<string, MethodTag>;
}

let inForce = read(START_VOCABULARY);
const listeners = new Set<() => void>();

function read(tags: readonly MethodTag[]): InForce {
  const all = METHOD_FAMILIES.flatMap((family) => tags.filter((entry) => entry.family === family));
  return {
    all,
    inUse: all.filter(({ retiredInto }) => retiredInto === null),
    byTag: new Map(all.map((entry) => [entry.tag, entry])),
  };
}

/** Puts a vocabulary in force, in the order given within each family. */
export function setVocabulary(tags: readonly MethodTag[]): void {
  inForce = read(tags);
  for (const listener of listeners) listener();
}

/** Calls back after each change, until the returned function is called. */
export function onVocabularyChange(listener: () => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

/**
 * Does something under another vocabulary: what a release froze is read in its own words.
 *
 * @param work - Must not wait for anything: the vocabulary is put back when it returns.
 */
export function withVocabulary<T>(tags: readonly MethodTag[], work: () => T): T {
  const before = inForce;
  inForce = read(tags);
  try {
    return work();
  } finally {
    inForce = before;
  }
}

/** Every tag, retired ones too; the same array until the vocabulary changes. */
export function vocabulary(): readonly MethodTag[] {
  return inForce.all;
}

/** Tags in use, by family; the same array until the vocabulary changes. */
export function methodTags(): readonly MethodTag[] {
  return inForce.inUse;
}

/** The tag in use that a tag stands for: itself, or what took it over; null when there is no such tag. */
export function currentTag(tag: string): MethodTag | null {
  let entry = inForce.byTag.get(tag);
  // As many steps as there are tags, so that a circle ends.
  for (let step = 0; entry && step <= inForce.all.length; step += 1) {
    if (entry.retiredInto === null) return entry;
    entry = inForce.byTag.get(entry.retiredInto);
  }
  return null;
}

/** The tags in use that these stand for, each once; what is no tag stays as it is. */
export function currentTags(tags: readonly string[]): string[] {
  return [...new Set(tags.map((tag) => currentTag(tag)?.tag ?? tag))];
}

/** Whether one of these tags is, or was taken over by the same tag as, the one asked for. */
export function carriesTag(tags: readonly string[], wanted: string): boolean {
  return currentTags(tags).includes(currentTag(wanted)?.tag ?? wanted);
}

/** The entries in use of these tags, in the vocabulary's order. */
export function methodsOf(tags: readonly string[]): MethodTag[] {
  const current = currentTags(tags);
  return inForce.inUse.filter(({ tag }) => current.includes(tag));
}

// ---- Families

/**
 * Family a record is shown under: the one its tags share; several families make it a joint result,
 * shown as "other".
 *
 * @returns Null when no tag belongs to the vocabulary.
 */
export function familyOf(tags: readonly string[]): MethodFamily | null {
  const families = familiesOf(tags);
  if (families.length > 1) return "other";
  return families[0] ?? null;
}

/** Every family the tags belong to, in the order of the vocabulary: what a filter by family looks at. */
export function familiesOf(tags: readonly string[]): MethodFamily[] {
  const met = new Set(methodsOf(tags).map(({ family }) => family));
  return METHOD_FAMILIES.filter((family) => met.has(family));
}

// ---- Spellings

/** Letters and digits only, Lyα spelled one way: what two spellings of one word share. */
export function looseWord(text: string): string {
  return text
    .replace(/[αΑ]/g, "a")
    .normalize("NFKD")
    .toLowerCase()
    .replace(/lyman/g, "ly")
    .replace(/alpha/g, "a")
    .replace(/[^a-z0-9]+/g, "");
}

/** Every spelling a tag is met under. */
export function spellingsOf({
  tag,
  name,
  aliases,
}: Pick<MethodTag, "tag" | "name" | "aliases">): string[] {
  return [tag, name, ...aliases];
}

/**
 * The tag a hand-kept list means by a word: its tag, name or one of its aliases, without case or
 * punctuation; the words of a retired tag mean the one that took it over.
 */
export function findTag(word: string): MethodTag | null {
  const loose = looseWord(word);
  if (loose === "") return null;
  const met = inForce.all.find((entry) =>
    spellingsOf(entry).some((spelling) => looseWord(spelling) === loose),
  );
  return met ? currentTag(met.tag) : null;
}
