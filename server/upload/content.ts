import { HttpProblem } from "~server/common/errors";

import type { UploadKind } from "./upload.entity";

const ENTRY = /@\s*[A-Za-z]+\s*[{(]/;

/**
 * Text of an uploaded file. What it is told by its content: name and declared type prove nothing.
 *
 * @throws {HttpProblem} 400, with the reason in words.
 */
export function uploadedText(bytes: Uint8Array, kind: UploadKind): string {
  let text: string;
  try {
    text = new TextDecoder("utf-8", { fatal: true }).decode(bytes);
  } catch {
    throw problem("The file is not UTF-8 text. Save it as UTF-8 and choose it again.");
  }
  if (/[\u0000-\u0008\u000e-\u001f]/.test(text)) {
    throw problem("The file is no text: it holds control characters.");
  }
  if (text.trim() === "") throw problem("The file is empty.");
  const isBibtex = ENTRY.test(text);
  if (kind === "bib" && !isBibtex) {
    throw problem("The file holds no BibTeX entry. An entry begins like @article{key, author = …");
  }
  if (kind === "csv") {
    // A cell may quote BibTeX; a table's first line doesn't.
    const [header = ""] = text.trimStart().split(/\r\n?|\n/, 1);
    if (ENTRY.test(header)) throw problem("The file is BibTeX, not a table.");
    if (/^\s*[<{[]/.test(header) || !/[,;\t]/.test(header)) {
      throw problem("The file is no CSV table: its first line holds no column names.");
    }
  }
  return text;
}

/** A file's name for display: no folders, no control characters. */
export function uploadedName(given: string): string {
  const last = given.split(/[/\\]/).at(-1) ?? "";
  return (
    last
      .replace(/\p{Cc}/gu, "")
      .trim()
      .slice(0, 200) || "file"
  );
}

function problem(sentence: string): HttpProblem {
  return new HttpProblem(400, "UNREADABLE_FILE", sentence);
}
