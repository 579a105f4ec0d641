/** One .bib from the stored entries, with the journal macros they use defined in an @preamble. */

/**
 * Joins BibTeX entries into a file that compiles by itself.
 *
 * @param entries - Stored texts, each one entry with the registry's key already in it.
 * @param macros - Name of a journal macro without its backslash, and the text it stands for.
 * @param comments - Lines for the head of the file; BibTeX reads over text outside entries, so an at sign
 *   in a line is spelled out.
 */
export function bibliography(
  entries: readonly string[],
  macros: Readonly<Record<string, string>>,
  comments: readonly string[] = [],
): string {
  const unique = [...new Set(entries.map((entry) => entry.trim()))].filter((text) => text !== "");
  const used = usedMacros(unique, macros);
  const head = comments.map((line) => `% ${line.replace(/[\r\n]+/g, " ").replace(/@/g, "(at)")}\n`);
  const preamble = used.map(
    (name) => `@preamble{"\\providecommand{\\${name}}{${texText(macros[name] ?? "")}}"}\n`,
  );
  const parts = [head.join(""), preamble.join(""), ...unique.map((entry) => `${entry}\n`)];
  return parts.filter((part) => part !== "").join("\n");
}

/** Names of the macros that stand in the entries, in alphabetical order. */
function usedMacros(
  entries: readonly string[],
  macros: Readonly<Record<string, string>>,
): string[] {
  const met = new Set<string>();
  for (const entry of entries) {
    for (const [, name = ""] of entry.matchAll(/\\([A-Za-z]+)/g)) {
      if (Object.hasOwn(macros, name)) met.add(name);
    }
  }
  return [...met].sort();
}

/** A journal's name inside a BibTeX string inside TeX. */
function texText(text: string): string {
  return text.replace(/[&%#_]/g, "\\$&").replace(/"/g, "''");
}
