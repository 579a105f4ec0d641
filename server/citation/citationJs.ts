import "@citation-js/plugin-bibtex";

import { Cite, logger } from "@citation-js/core";

// What the library would print to the console is said in the entry's remarks.
logger.level = "silent";

export interface CslName {
  family?: string;
  given?: string;
  "non-dropping-particle"?: string;
  "dropping-particle"?: string;
  suffix?: string;
  literal?: string;
}

export interface Csl {
  id: string;
  type: string;
  title?: string;
  author?: CslName[];
  editor?: CslName[];
  "container-title"?: string;
  publisher?: string;
  volume?: string;
  page?: string;
  DOI?: string;
  URL?: string;
  issued?: { "date-parts"?: number[][]; literal?: string };
  [other: string]: unknown;
}

/**
 * CSL-JSON of one entry.
 *
 * @throws Whatever citation-js throws on TeX it can't read.
 */
export function cslOf(type: string, fields: ReadonlyMap<string, string>): Csl {
  const body = [...fields].map(([name, value]) => `${name} = {${value}}`).join(",\n");
  // forceType: otherwise text that looks like an address would be fetched.
  const { data } = new Cite(`@${type}{key,\n${body}\n}`, { forceType: "@bibtex/text" });
  const first = data[0];
  if (!first) throw new Error("no entry was found");
  const { _graph, "citation-key": _key, ...csl } = first;
  return csl as Csl;
}

/**
 * BibTeX of one CSL-JSON item; everything that TeX would act on is escaped.
 *
 * @throws Whatever citation-js throws on an item it can't write.
 */
export function bibtexOf(csl: Csl): string {
  // forceType: otherwise text that looks like an address would be fetched.
  return new Cite([csl], { forceType: "@csl/list+object" }).format("bibtex").trim();
}
