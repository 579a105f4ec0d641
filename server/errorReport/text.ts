import { refuse, type Refusal } from "~server/common/outcomes";

/** Without control characters and marks of direction, with plain line ends. */
export function plainText(text: string): string {
  return text
    .normalize("NFC")
    .replace(/\r\n?/g, "\n")
    .replace(/[\u0000-\u0009\u000b-\u001f\u007f-\u009f\u2028-\u202e\u2066-\u2069]+/g, " ")
    .replace(/\n{3,}/g, "\n\n")
    .trim();
}

/** Marked line by line, so that nothing in it passes for the registry's own words in a mail. */
export function quoted(text: string): string {
  return text
    .split("\n")
    .map((line) => `> ${line}`.trimEnd())
    .join("\n");
}

/** Why a text can't be taken, by its length in characters; null when it can. */
export function lengthProblem(
  text: string,
  { shortest, longest }: { shortest: number; longest: number },
  what: string,
): Refusal | null {
  const length = [...text].length;
  if (length >= shortest && length <= longest) return null;
  return refuse(
    "TEXT_LENGTH",
    `${what} in ${shortest} to ${longest} characters; these are ${length}.`,
    "text",
  );
}
