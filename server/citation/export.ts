import type { Citation } from "./citation.entity";
import { journalName } from "./journals";

/** A .bib of these citations that BibTeX takes as it stands. */
export function compilableBibtex(
  citations: readonly Pick<Citation, "key" | "entryBibtex">[],
): string {
  const macros = new Set<string>();
  for (const { entryBibtex } of citations) {
    for (const [, word] of entryBibtex.matchAll(/\\([A-Za-z]+)/g)) {
      if (word && journalName(word) !== null) macros.add(word);
    }
  }
  return [...citations.map((citation) => citation.entryBibtex)].join("\n\n");
}
