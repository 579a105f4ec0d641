/**
 * Reads BibTeX text into entries with their lines, the way BibTeX itself scans it: braces count
 * whether or not a backslash stands before them, a quote ends at the first quote outside braces,
 * and what stands between entries is ignored. Values are joined, @string words expanded.
 *
 * An entry that can't be read becomes a BrokenEntry; reading goes on at the next entry.
 */

export const MAX_TEXT_BYTES = 1_000_000;
export const MAX_ENTRIES = 500;
export const MAX_VALUE_CHARACTERS = 60_000;
export const MAX_DEPTH = 40;
/** Comments, definitions and preambles count here too: each may look far ahead for its end. */
const MAX_CONSTRUCTS = 5 * MAX_ENTRIES;
/** Definitions that use definitions can grow without bound. */
const MAX_EXPANDED_CHARACTERS = 1_000_000;

export interface RawField {
  name: string;
  line: number;
  /** Without the outer braces or quotes. */
  value: string;
}

export interface RawEntry {
  broken: false;
  /** Line of the @. */
  line: number;
  type: string;
  givenKey: string;
  fields: Map<string, RawField>;
  /** The text exactly as it came. */
  source: string;
  /** The text around the key, with words BibTeX would not know written out. */
  beforeKey: string;
  afterKey: string;
  remarks: string[];
}

export interface BrokenEntry {
  broken: true;
  /** Line of the fault. */
  line: number;
  givenKey: string;
  reason: string;
}

const MONTHS = new Set("jan feb mar apr may jun jul aug sep oct nov dec".split(" "));

/** An entry that begins on a line of its own; inside a value it means that a brace is missing. */
const ENTRY_ON_LINE = /^[ \t]*@[ \t]*[A-Za-z]+[ \t]*[{(][ \t]*(?:[^\s,{}()="]+[ \t]*)?,/gm;
/** A field that begins inside a value: the value was meant to end before it. */
const NEXT_FIELD = /,[ \t]*\n\s*[A-Za-z][\w-]*\s*=\s*["{\\\w]/;
const ANY_ENTRY = /@[ \t]*[A-Za-z]+\s*[{(]/g;

class Fault extends Error {
  constructor(
    readonly at: number,
    readonly reason: string,
  ) {
    super(reason);
  }
}

export function readBibtex(
  input: string,
  isJournalMacro: (word: string) => boolean,
): (RawEntry | BrokenEntry)[] {
  return new Reader(input.replace(/^\uFEFF/, "").replace(/\r\n?/g, "\n"), isJournalMacro).read();
}

class Reader {
  private position = 0;
  private readonly lineStarts: number[] = [0];
  private readonly entryStarts: number[] = [];
  private readonly strings = new Map<string, string>();
  private readonly found: (RawEntry | BrokenEntry)[] = [];
  /** Where the entry being read must have ended at the latest. */
  private limit = 0;
  private constructs = 0;
  private expanded = 0;

  constructor(
    private readonly text: string,
    private readonly isJournalMacro: (word: string) => boolean,
  ) {
    for (let i = text.indexOf("\n"); i >= 0; i = text.indexOf("\n", i + 1))
      this.lineStarts.push(i + 1);
    for (const match of text.matchAll(ENTRY_ON_LINE)) {
      this.entryStarts.push(match.index + match[0].indexOf("@"));
    }
  }

  read(): (RawEntry | BrokenEntry)[] {
    for (;;) {
      const at = this.text.indexOf("@", this.position);
      this.noteStrayText(this.position, at < 0 ? this.text.length : at);
      if (at < 0) return this.found;
      this.constructs += 1;
      if (this.found.length >= MAX_ENTRIES || this.constructs > MAX_CONSTRUCTS) {
        this.found.push({
          broken: true,
          line: this.lineOf(at),
          givenKey: "",
          reason: `More than ${MAX_ENTRIES} entries: the rest was not read. Bring it in parts.`,
        });
        return this.found;
      }
      this.readAt(at);
    }
  }

  private readAt(at: number): void {
    const head = /@\s*([A-Za-z]+)\s*([{(]?)/y;
    head.lastIndex = at;
    const match = head.exec(this.text);
    if (!match) {
      this.constructs -= 1;
      this.position = at + 1;
      return;
    }
    const type = match[1]!.toLowerCase();
    this.limit = this.nextEntryStart(at + 1) ?? this.text.length;
    this.position = head.lastIndex;
    if (!match[2]) {
      // An @ in running text, an address say, is no entry; at the start of a line it is meant as one.
      const before = this.text.slice(this.lineStarts[this.lineOf(at) - 1], at);
      const meant = before.length < 80 && before.trim() === "" && type !== "comment";
      if (meant) this.fail(at, "", `An opening brace is missing after @${type}.`);
      else this.constructs -= 1;
      return;
    }
    const close = match[2] === "{" ? "}" : ")";
    let givenKey = "";
    try {
      if (type === "comment") this.skipGroup(match[2]);
      else if (type === "preamble") {
        this.value([]);
        this.expectEnd(close, "@preamble");
      } else if (type === "string") this.stringDefinition(close);
      else {
        const key = this.key();
        givenKey = key.text;
        this.found.push(this.entry(at, type, key, close));
      }
    } catch (error) {
      if (!(error instanceof Fault)) throw error;
      this.fail(error.at, givenKey || this.keyGuess(at), error.reason, at);
    }
  }

  private fail(at: number, givenKey: string, reason: string, entryAt = at): void {
    const line = this.lineOf(Math.min(at, Math.max(0, this.text.length - 1)));
    const began = this.lineOf(entryAt);
    const where = began === line ? "" : ` The entry begins on line ${began}.`;
    this.found.push({ broken: true, line, givenKey, reason: reason + where });
    ANY_ENTRY.lastIndex = Math.max(at, entryAt + 1);
    const next = ANY_ENTRY.exec(this.text)?.index ?? this.text.length;
    this.position = Math.min(next, this.nextEntryStart(entryAt + 1) ?? this.text.length);
  }

  private entry(
    at: number,
    type: string,
    key: { start: number; end: number; text: string; comma: boolean },
    close: string,
  ): RawEntry {
    const fields = new Map<string, RawField>();
    const remarks: string[] = [];
    const edits: Edit[] = [];
    if (!key.text) remarks.push("The entry has no key of its own.");
    for (;;) {
      this.space();
      while (this.peek() === ",") {
        this.position += 1;
        this.space();
      }
      if (this.peek() === close) break;
      const nameAt = this.position;
      if (nameAt >= this.limit) throw this.neverClosed(fields);
      const name = this.take(/[^\s"#%'(),={}@\\~]+/y);
      if (!name || /^\d/.test(name)) {
        throw new Fault(
          nameAt,
          `A field name is expected, but “${this.text[nameAt]}” stands there.`,
        );
      }
      this.space();
      if (this.peek() !== "=")
        throw new Fault(nameAt, `There is no = after the field name “${name}”.`);
      this.position += 1;
      const value = this.value(edits, name, remarks);
      const field = { name: name.toLowerCase(), line: this.lineOf(nameAt), value };
      if (fields.has(field.name)) {
        remarks.push(`“${field.name}” is given twice; the first one counts.`);
      } else fields.set(field.name, field);
      this.space();
      const next = this.peek();
      if (next !== "," && next !== close) {
        if (this.position >= this.limit) throw this.neverClosed(fields);
        const afterOther = next === "}" || next === ")";
        throw new Fault(
          this.position,
          afterOther
            ? `The entry opened with ${close === "}" ? "{" : "("} but ends with ${next}.`
            : `A comma is missing after the value of “${name}”.`,
        );
      }
    }
    this.position += 1;
    if (fields.size === 0) throw new Fault(at, "The entry holds no fields.");
    const end = this.position;
    let beforeKey = this.text.slice(at, key.start);
    if (!key.comma) beforeKey = beforeKey.trimEnd();
    const afterKey =
      (key.comma ? "" : ",\n  ") + applyEdits(this.text.slice(key.end, end), edits, key.end);
    return {
      broken: false,
      line: this.lineOf(at),
      type,
      givenKey: key.text,
      fields,
      source: this.text.slice(at, end),
      beforeKey,
      afterKey,
      remarks,
    };
  }

  private neverClosed(fields: ReadonlyMap<string, RawField>): Fault {
    for (const { name, line, value } of fields.values()) {
      if (!NEXT_FIELD.test(value)) continue;
      const at = this.lineStarts[line - 1] ?? 0;
      return new Fault(at, `The value of “${name}” is never closed: it runs into the next field.`);
    }
    return new Fault(this.position - 1, "The entry is never closed: its last brace is missing.");
  }

  /** The key up to its comma; an entry that begins with a field has none. */
  private key(): { start: number; end: number; text: string; comma: boolean } {
    this.space();
    const start = this.position;
    const text = this.take(/[^,={}"#%\n]*/y);
    const next = this.peek();
    if (next === "," && this.position < this.limit) {
      const end = start + text.trimEnd().length;
      this.position += 1;
      return { start, end, text: text.trim(), comma: true };
    }
    if (next === "=") {
      this.position = start;
      return { start, end: start, text: "", comma: false };
    }
    if (next === "}" || this.position >= this.limit) {
      throw new Fault(start, "The entry holds no fields.");
    }
    throw new Fault(start, `There is no comma after the key “${text.trim()}”.`);
  }

  private stringDefinition(close: string): void {
    this.space();
    const at = this.position;
    const name = this.take(/[^\s"#%'(),={}@\\~]+/y);
    this.space();
    if (!name || this.peek() !== "=") {
      throw new Fault(at, "A @string needs a name and a value: @string{name = {text}}.");
    }
    this.position += 1;
    const value = this.value([]);
    this.expectEnd(close, "@string");
    this.strings.set(name.toLowerCase(), value);
  }

  private expectEnd(close: string, what: string): void {
    this.space();
    if (this.peek() === ",") {
      this.position += 1;
      this.space();
    }
    if (this.peek() !== close || this.position >= this.limit) {
      throw new Fault(this.position, `The ${what} is never closed.`);
    }
    this.position += 1;
  }

  /** Braced, quoted, number or word, joined by #. */
  private value(edits: Edit[], name = "", remarks: string[] = []): string {
    let joined = "";
    for (;;) {
      this.space();
      const start = this.position;
      const first = this.peek();
      if (start >= this.limit) {
        throw new Fault(Math.max(0, start - 1), `The value of “${name}” is missing.`);
      }
      if (first === "{" || first === '"') joined += this.delimited(first, name);
      else if (first === "\\") {
        const word = this.take(/\\[A-Za-z]+/y);
        if (!word) throw new Fault(start, `The value of “${name}” needs braces or quotes.`);
        joined += word;
        edits.push({ start, end: this.position, text: `{${word}}` });
        remarks.push(`${word} stood without braces; they were added.`);
      } else {
        const word = this.take(/[^\s"#%'(),={}@\\~]+/y);
        if (!word) {
          const reason =
            first === "," || first === "}"
              ? `The value of “${name}” is missing.`
              : `The value of “${name}” needs braces or quotes.`;
          throw new Fault(start, reason);
        }
        joined += this.word(word, start, name, edits, remarks);
      }
      if (joined.length > MAX_VALUE_CHARACTERS) {
        throw new Fault(
          start,
          `The value of “${name}” is longer than ${MAX_VALUE_CHARACTERS} characters.`,
        );
      }
      this.space();
      if (this.peek() !== "#") return joined;
      this.position += 1;
    }
  }

  private word(
    word: string,
    start: number,
    name: string,
    edits: Edit[],
    remarks: string[],
  ): string {
    const lower = word.toLowerCase();
    const edit = (text: string) => edits.push({ start, end: this.position, text });
    const defined = this.strings.get(lower);
    if (defined !== undefined) {
      this.expanded += defined.length;
      if (this.expanded > MAX_EXPANDED_CHARACTERS) {
        throw new Fault(start, "The file's own @string words stand for too much text.");
      }
      edit(`{${defined}}`);
      return defined;
    }
    if (/^\d+$/.test(word) || MONTHS.has(lower)) return word;
    if (this.isJournalMacro(lower)) {
      edit(`{\\${lower}}`);
      return `\\${lower}`;
    }
    edit(`{${word}}`);
    remarks.push(`The value of “${name}”, ${word}, stands without braces; it was taken as it is.`);
    return word;
  }

  private delimited(open: string, name: string): string {
    const start = this.position;
    let depth = open === "{" ? 1 : 0;
    let i = start + 1;
    for (; i < this.limit; i += 1) {
      const c = this.text[i];
      if (c === "{") {
        depth += 1;
        if (depth > MAX_DEPTH) {
          throw new Fault(i, `Braces in “${name}” are nested more than ${MAX_DEPTH} deep.`);
        }
      } else if (c === "}") {
        depth -= 1;
        if (depth === 0 && open === "{") break;
        if (depth < 0) {
          if (NEXT_FIELD.test(this.text.slice(start, i))) {
            throw new Fault(
              start,
              `The value of “${name}” is never closed: a quotation mark is missing.`,
            );
          }
          throw new Fault(i, `A brace in the value of “${name}” closes what was never opened.`);
        }
      } else if (c === '"' && open === '"' && depth === 0) break;
    }
    if (i >= this.limit) {
      const missing = open === '"' && depth === 0 ? "quotation mark" : "closing brace";
      throw new Fault(
        start,
        `The value of ${name ? `“${name}”` : "this part"} is never closed: a ${missing} is missing.`,
      );
    }
    this.position = i + 1;
    return this.text.slice(start + 1, i);
  }

  private skipGroup(open: string): void {
    const close = open === "{" ? "}" : ")";
    let depth = 1;
    let i = this.position;
    // Inside a comment whole entries may stand, so the next entry is no limit here.
    const end = Math.min(this.text.length, i + MAX_VALUE_CHARACTERS);
    for (; i < end && depth > 0; i += 1) {
      if (this.text[i] === open) depth += 1;
      else if (this.text[i] === close) depth -= 1;
    }
    // Unclosed: only the line is a comment.
    if (depth > 0) {
      const line = this.text.indexOf("\n", this.position);
      i = line < 0 ? this.text.length : line;
    }
    this.position = i;
  }

  /** Fields after an entry's end mean that a brace closed it too early. */
  private noteStrayText(from: number, to: number): void {
    const last = this.found.at(-1);
    if (!last || last.broken || from === 0) return;
    if (/[A-Za-z]\s*=\s*["{\d]/.test(this.text.slice(from, Math.min(to, from + 2000)))) {
      last.remarks.push("Fields after the closing brace were ignored: does it close too early?");
    }
  }

  private keyGuess(at: number): string {
    const guess = /@\s*[A-Za-z]+\s*[{(]\s*([^\s,={}"]*)/y;
    guess.lastIndex = at;
    return guess.exec(this.text)?.[1] ?? "";
  }

  private nextEntryStart(from: number): number | undefined {
    let low = 0;
    let high = this.entryStarts.length;
    while (low < high) {
      const middle = (low + high) >> 1;
      if (this.entryStarts[middle]! < from) low = middle + 1;
      else high = middle;
    }
    return this.entryStarts[low];
  }

  private lineOf(offset: number): number {
    let low = 0;
    let high = this.lineStarts.length;
    while (low < high) {
      const middle = (low + high) >> 1;
      if (this.lineStarts[middle]! <= offset) low = middle + 1;
      else high = middle;
    }
    return low;
  }

  private peek(): string | undefined {
    return this.text[this.position];
  }

  private space(): void {
    this.take(/\s*/y);
  }

  private take(pattern: RegExp): string {
    pattern.lastIndex = this.position;
    const taken = pattern.exec(this.text)?.[0] ?? "";
    this.position += taken.length;
    return taken;
  }
}

interface Edit {
  start: number;
  end: number;
  text: string;
}

function applyEdits(text: string, edits: readonly Edit[], offset: number): string {
  let result = "";
  let at = 0;
  for (const edit of edits) {
    result += text.slice(at, edit.start - offset) + edit.text;
    at = edit.end - offset;
  }
  return result + text.slice(at);
}
