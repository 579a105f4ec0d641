/** What an entry of the method vocabulary may hold: checked in the form and again on the server. */
import { looseWord, METHOD_FAMILIES, spellingsOf, type MethodTag } from "./vocabulary";

export const METHOD_LENGTHS = {
  tag: 40,
  name: 60,
  definition: 200,
  caution: 200,
  alias: 80,
  aliases: 40,
  position: 9999,
} as const;

/** What a maintainer says of a method. */
export type MethodWords = Omit<MethodTag, "retiredInto"> & {
  /** Where it stands in its family's list: lower first. */
  position: number;
};

export interface MethodProblem {
  field: keyof MethodWords;
  message: string;
}

/** Without line breaks, doubled blanks and blanks at the ends. */
const plain = (text: string): string => text.replace(/[\u0000-\u001f\u007f\s]+/g, " ").trim();

/** The words as they are kept: aliases once each, and none that repeats tag or name. */
export function tidyMethod(given: MethodWords): MethodWords {
  const met = new Set([given.tag, given.name].map(looseWord));
  const aliases = given.aliases.map(plain).filter((alias) => {
    const loose = looseWord(alias);
    if (alias !== "" && met.has(loose)) return false;
    met.add(loose);
    return alias !== "";
  });
  return {
    ...given,
    tag: given.tag.trim(),
    name: plain(given.name),
    definition: plain(given.definition),
    caution: plain(given.caution),
    aliases,
  };
}

/**
 * Why an entry can't stand, or null.
 *
 * @param entry - Tidied.
 * @param others - Every other entry, retired ones too: their words keep their meaning.
 */
export function methodProblem(
  entry: MethodWords,
  others: readonly MethodTag[],
): MethodProblem | null {
  if (!/^[a-z][A-Za-z0-9]+$/.test(entry.tag) || entry.tag.length > METHOD_LENGTHS.tag) {
    return {
      field: "tag",
      message: `A tag is one word in camelCase, such as darkPixels: 2 to ${METHOD_LENGTHS.tag} letters and digits, a small letter first.`,
    };
  }
  if (!METHOD_FAMILIES.includes(entry.family)) {
    return { field: "family", message: "Choose a family." };
  }
  for (const [field, words] of [
    ["name", "A name"],
    ["definition", "A definition"],
    ["caution", "A caution"],
  ] as const) {
    if (entry[field] === "" || entry[field].length > METHOD_LENGTHS[field]) {
      return { field, message: `${words} has 1 to ${METHOD_LENGTHS[field]} characters.` };
    }
  }
  if (looseWord(entry.name) === "") {
    return { field: "name", message: "A name has a letter or a digit at least." };
  }
  if (
    entry.aliases.length > METHOD_LENGTHS.aliases ||
    entry.aliases.some((alias) => alias.length > METHOD_LENGTHS.alias || looseWord(alias) === "")
  ) {
    return {
      field: "aliases",
      message: `At most ${METHOD_LENGTHS.aliases} other spellings, each of 1 to ${METHOD_LENGTHS.alias} characters with a letter or a digit.`,
    };
  }
  const { position } = entry;
  if (!Number.isInteger(position) || position < 0 || position > METHOD_LENGTHS.position) {
    return {
      field: "position",
      message: `The place in the list is a whole number from 0 to ${METHOD_LENGTHS.position}.`,
    };
  }
  return takenSpelling(entry, others);
}

function takenSpelling(entry: MethodWords, others: readonly MethodTag[]): MethodProblem | null {
  const fields: [keyof MethodWords, string][] = [
    ["tag", entry.tag],
    ["name", entry.name],
    ...entry.aliases.map((alias): [keyof MethodWords, string] => ["aliases", alias]),
  ];
  for (const [field, spelling] of fields) {
    const other = others.find((one) =>
      spellingsOf(one).some((word) => looseWord(word) === looseWord(spelling)),
    );
    if (other) {
      return {
        field,
        message: `“${spelling}” is a word for ${other.name} already: a word stands for one method.`,
      };
    }
  }
  return null;
}
