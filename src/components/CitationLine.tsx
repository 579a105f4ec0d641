import { Text as NativeText } from "react-native";
import { Dense } from "./Text";

interface CitationParts {
  authors?: readonly string[];
  shortName: string;
  year?: number | null;
  container?: string | null;
  volume?: string | null;
  pages?: string | null;
  title?: string | null;
}

/** "Osuwande, A. & Vask, I." of a list of authors; four or more become "and others". */
function people(authors: readonly string[]): string {
  // The paper's own list can end in "and others".
  const named = authors.filter((author) => author !== "and others");
  if (named.length > 3) return `${named[0]} and others`;
  if (named.length < authors.length) return `${named.join(", ")} and others`;
  if (authors.length < 2) return authors[0] ?? "";
  return `${authors.slice(0, -1).join(", ")} & ${authors[authors.length - 1]}`;
}

/** A paper as it will be cited, in one line: authors (year), journal in italics, volume, page. */
export function CitationLine({
  citation,
  muted = true,
}: {
  citation: CitationParts;
  muted?: boolean;
}) {
  const { authors, shortName, year, container, volume, pages } = citation;
  const who =
    authors && authors.length > 0 ? `${people(authors)}${year ? ` (${year})` : ""}` : shortName;
  const where = [volume, pages].filter(Boolean).join(", ");
  return (
    <Dense muted={muted}>
      {who}
      {container ? ", " : ""}
      {container ? <NativeText style={{ fontStyle: "italic" }}>{container}</NativeText> : null}
      {where ? ` ${where}` : ""}
    </Dense>
  );
}
