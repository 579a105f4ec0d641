/** Files that show what a paper prints: what they may be, how many and how large. */

export const EVIDENCE_KINDS = ["pdf", "png", "jpeg", "csv"] as const;
export type EvidenceKind = (typeof EVIDENCE_KINDS)[number];

export const EVIDENCE_WORDS: Record<EvidenceKind, string> = {
  pdf: "PDF",
  png: "PNG picture",
  jpeg: "JPEG picture",
  csv: "CSV table",
};

/** Endings of a file's name that agree with its kind. */
export const EVIDENCE_ENDINGS: Record<EvidenceKind, readonly string[]> = {
  pdf: [".pdf"],
  png: [".png"],
  jpeg: [".jpg", ".jpeg"],
  csv: [".csv"],
};

/** For a file picker. */
export const EVIDENCE_ACCEPT = Object.values(EVIDENCE_ENDINGS).flat().join(",");

export const EVIDENCE_LIMITS = {
  /** Bytes of one file. */
  bytes: 10_000_000,
  /** Files of one revision. */
  files: 10,
  /** Bytes of all files one person has with revisions that are not approved. */
  bytesOpen: 200_000_000,
  /** Characters of a name and of a caption. */
  name: 120,
  caption: 300,
} as const;

/** "1.4 MB", "10 MB", "12 kB", "1 byte": sizes as people read them, decimal. */
export function bytesInWords(bytes: number): string {
  if (bytes >= 999_950) return `${(bytes / 1_000_000).toFixed(1).replace(/\.0$/, "")} MB`;
  if (bytes >= 1000) return `${Math.round(bytes / 1000)} kB`;
  return bytes === 1 ? "1 byte" : `${bytes} bytes`;
}
