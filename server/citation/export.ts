import { bibliography } from "~shared/formats/bibliography";

import type { Citation } from "./citation.entity";
import { JOURNAL_MACROS, journalName } from "./journals";

export type ExportedCitation = Pick<Citation, "key" | "entryBibtex">;

/**
 * A .bib that BibTeX takes as it stands: the stored entries in the order of their keys, each once,
 * behind definitions of the journal macros they use.
 *
 * @param header - Lines for a reader, put before everything; BibTeX passes over them.
 */
export function compilableBibtex(
  citations: readonly ExportedCitation[],
  header: readonly string[] = [],
): string {
  const entries = [...citations]
    .sort((a, b) => (a.key < b.key ? -1 : a.key > b.key ? 1 : 0))
    .map((citation) => citation.entryBibtex);
  return bibliography(entries, { ...JOURNAL_MACROS, ...otherCase(entries) }, header);
}

/** \ApJ beside \apj: TeX minds the case, the people who write entries don't. */
function otherCase(entries: readonly string[]): Record<string, string> {
  const words = entries.flatMap((entry) => entry.match(/(?<=\\)[A-Za-z]*[A-Z][A-Za-z]*/g) ?? []);
  return Object.fromEntries(
    words.flatMap((word) => {
      const name = journalName(word);
      return name === null ? [] : [[word, name]];
    }),
  );
}
