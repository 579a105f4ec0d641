import { normalizeArxiv } from "~shared/identifiers/arxiv";
import { normalizeDoi } from "~shared/identifiers/doi";

import { bibtexOf } from "./citationJs";
import { tidyCsl } from "./lookUpCsl";

/** Largest answer that is read, in bytes; a collaboration's author list has some tens of thousands. */
const MOST_BYTES = 200_000;
const MOST_REDIRECTS = 3;
/** Longer than any identifier that is printed. */
const LONGEST_TYPED = 300;

/** What was typed, in its one form, and the DOI that a service knows it by. */
export interface Identifier {
  kind: "doi" | "arxiv";
  value: string;
  /** arXiv gives each of its papers a DOI of this form. */
  doi: string;
}

const ARXIV_DOI = /^10\.48550\/arxiv\.(.+)$/;

/**
 * Reads a DOI or an arXiv number, in any form it is written in, addresses included.
 *
 * @returns Null when the text is neither.
 */
export function readIdentifier(text: string): Identifier | null {
  const typed = text.trim();
  if (typed.length > LONGEST_TYPED || !/^[\x20-\x7e]+$/.test(typed)) return null;
  const doi = normalizeDoi(typed);
  const arxiv = normalizeArxiv(doi === null ? typed : (ARXIV_DOI.exec(doi)?.[1] ?? ""));
  if (arxiv !== null) return { kind: "arxiv", value: arxiv, doi: `10.48550/arxiv.${arxiv}` };
  return doi === null ? null : { kind: "doi", value: doi, doi };
}

/** Why a look-up came to nothing. */
export type LookUpProblem = "notFound" | "timeOut" | "unreachable" | "unreadable" | "otherPaper";

export class LookUpError extends Error {
  override readonly name = "LookUpError";

  constructor(readonly problem: LookUpProblem) {
    super(problem);
  }
}

/**
 * Asks the configured service for a paper and writes its answer as BibTeX.
 *
 * @param template - The service's address with {id} where the encoded DOI goes.
 * @param timeoutMs - For the whole of it, redirects and body included.
 * @param today - Date the entry says it was looked up on, 2031-04-02.
 * @throws {LookUpError} saying why there is no entry.
 */
export async function lookUpBibtex(
  template: string,
  identifier: Identifier,
  timeoutMs: number,
  today: string,
): Promise<string> {
  const address = new URL(template.replace("{id}", encodeURIComponent(identifier.doi)));
  const text = await fetchText(address, AbortSignal.timeout(timeoutMs));
  let answer: unknown;
  try {
    answer = JSON.parse(text);
  } catch {
    throw new LookUpError("unreadable");
  }
  const csl = tidyCsl(answer);
  if (csl === null) throw new LookUpError("unreadable");
  const answered = csl.DOI === undefined ? null : normalizeDoi(csl.DOI);
  if (identifier.kind === "doi") {
    if (answered !== null && answered !== identifier.doi) throw new LookUpError("otherPaper");
    csl.DOI = identifier.doi;
  } else if (answered === null || ARXIV_DOI.test(answered)) {
    // The number says it already; the DOI of the printed paper, if it came, stays.
    delete csl.DOI;
  }
  const more: Record<string, string> = { lookedup: `${identifier.value}, ${today}` };
  if (identifier.kind === "arxiv") {
    more.eprint = identifier.value;
    more.archiveprefix = "arXiv";
  }
  try {
    return withFields(bibtexOf(csl), more);
  } catch {
    throw new LookUpError("unreadable");
  }
}

/** Adds fields, whose values hold nothing that TeX would take for its own, before the last brace. */
function withFields(bibtex: string, fields: Readonly<Record<string, string>>): string {
  const end = bibtex.lastIndexOf("}");
  const lines = Object.entries(fields).map(([name, value]) => `\t${name} = {${texSafe(value)}},\n`);
  return `${bibtex.slice(0, end)}${lines.join("")}${bibtex.slice(end).trim()}\n`;
}

function texSafe(text: string): string {
  return text.replace(/[^\w./:,()\- ]/g, "");
}

async function fetchText(address: URL, signal: AbortSignal): Promise<string> {
  try {
    let from = address;
    for (let hops = 0; ; hops += 1) {
      const response = await fetch(from, {
        redirect: "manual",
        signal,
        headers: {
          accept: "application/vnd.citationstyles.csl+json, application/json;q=0.9",
          "user-agent": "Fogline",
        },
      });
      if (response.status >= 300 && response.status < 400) {
        await response.body?.cancel();
        from = redirected(from, response.headers.get("location"), address);
        if (hops === MOST_REDIRECTS) throw new LookUpError("unreachable");
        continue;
      }
      return await readBody(response);
    }
  } catch (error) {
    if (error instanceof LookUpError) throw error;
    throw new LookUpError(signal.aborted ? "timeOut" : "unreachable");
  }
}

/** Where a redirect leads, if it stays with the service that was configured. */
function redirected(from: URL, location: string | null, configured: URL): URL {
  const to = location !== null && URL.canParse(location, from) ? new URL(location, from) : null;
  if (to?.origin !== configured.origin) throw new LookUpError("unreachable");
  return to;
}

async function readBody(response: Response): Promise<string> {
  const refuse = async (problem: LookUpProblem): Promise<never> => {
    await response.body?.cancel();
    throw new LookUpError(problem);
  };
  if (response.status === 404 || response.status === 410) return refuse("notFound");
  if (response.status !== 200) return refuse("unreachable");
  const type = response.headers.get("content-type") ?? "";
  if (!/^application\/(?:[\w.-]+\+)?json\b/i.test(type)) return refuse("unreadable");
  if (Number(response.headers.get("content-length") ?? 0) > MOST_BYTES) return refuse("unreadable");
  const chunks: Uint8Array[] = [];
  let bytes = 0;
  const reader = response.body?.getReader();
  for (;;) {
    const part = await reader?.read();
    if (!part || part.done) break;
    bytes += part.value.byteLength;
    if (bytes > MOST_BYTES) {
      await reader?.cancel();
      throw new LookUpError("unreadable");
    }
    chunks.push(part.value);
  }
  return Buffer.concat(chunks).toString("utf8");
}
