import {
  EVIDENCE_ENDINGS,
  EVIDENCE_LIMITS,
  EVIDENCE_WORDS,
  type EvidenceKind,
} from "~shared/evidence/evidence";

/** Declared types that say nothing about a file. */
const SAYS_NOTHING = new Set(["", "application/octet-stream"]);

/** Types under which browsers send a kind; Windows calls a CSV what its spreadsheet calls it. */
const TYPES: Record<EvidenceKind, readonly string[]> = {
  pdf: ["application/pdf"],
  png: ["image/png"],
  jpeg: ["image/jpeg", "image/jpg"],
  csv: ["text/csv", "text/plain", "application/csv", "application/vnd.ms-excel"],
};

/**
 * Why a name can't be kept, or null: it comes back in a download's header and on screens.
 *
 * @param name - As it was sent, folders and all.
 */
export function nameProblem(name: string): string | null {
  if (name.trim() === "") return "The file has no name.";
  if (/[/\\]/.test(name) || /^[a-z]:/i.test(name) || name.startsWith(".")) {
    return "The file's name is a path. Send it under a plain name.";
  }
  // Control characters, and those that turn the reading direction: "exe.fdp" read as "pdf.exe".
  if (/[\p{Cc}\p{Cf}\p{Cs}\p{Co}\u2028\u2029]/u.test(name)) {
    return "The file's name holds invisible characters. Rename it.";
  }
  if (name.length > EVIDENCE_LIMITS.name) {
    return `The file's name is longer than ${EVIDENCE_LIMITS.name} characters. Rename it.`;
  }
  return null;
}

/** Why name and declared type don't fit what was found in the file, or null. */
export function lie(kind: EvidenceKind, name: string, declaredType: string): string | null {
  const is = EVIDENCE_WORDS[kind];
  const endings = EVIDENCE_ENDINGS[kind];
  if (!endings.some((ending) => name.toLowerCase().endsWith(ending))) {
    return `The file is a ${is}, and its name does not end in ${endings.join(" or ")}.`;
  }
  const type = (declaredType.split(";", 1)[0] ?? "").trim().toLowerCase();
  if (!SAYS_NOTHING.has(type) && !TYPES[kind].includes(type)) {
    return `The file is a ${is}, and it was sent as ${type.slice(0, 60)}.`;
  }
  return null;
}
