/** The curve of one record as CSV (RFC 4180, UTF-8): as printed, and beside it the nodes a likelihood takes. */
import { nodesByLine, parseCurve } from "~shared/statement/curve";
import { asUsed } from "~shared/statement/asUsed";
import { SPECIES_WORDS } from "~shared/statement/words";

import { csvFile } from "./constraintCsv";
import { demonstrationWords, EXPORT_CAUTIONS, lastEventWords } from "./exportRow";
import type { ExportHeader, ExportRow } from "./exportRow";

/**
 * A record's curve: printed value and height row by row, the value as used and L over its peak beside
 * them; both are empty in rows of zero density at the ends.
 *
 * @returns Null for a record without a curve. The same record and header give the same bytes.
 */
export function curveCsv(row: ExportRow, header: ExportHeader): string | null {
  const { fields } = row;
  if (fields.kind !== "curve" || fields.curveTable === null) return null;
  const { rows, problems } = parseCurve(fields.curveTable, fields.curveColumn);
  if (problems.length > 0) return null;
  const used = asUsed(fields);
  const nodes = nodesByLine(fields);
  const log = used?.evaluatedIn === "log10";
  return csvFile(
    [
      `${header.registry}: the tabulated curve of ${row.quotable} (${row.citation.shortName})`,
      demonstrationWords(header.demonstration),
      `Last event: ${lastEventWords(header)}`,
      `Licence: ${header.licence}`,
      ...(fields.species
        ? [`Printed: ${SPECIES_WORDS[fields.species]}, ${fields.scale ?? "linear"}`]
        : []),
      ...(used?.steps.map(({ text }) => text) ?? []),
      ...EXPORT_CAUTIONS,
    ],
    [
      "printed_value",
      fields.curveColumn === "lnLikelihood" ? "printed_ln_likelihood" : "printed_density",
      log ? "used_log10_value" : "used_value",
      "used_relative_likelihood",
    ],
    rows.map(({ line, text, height }) => {
      const node = nodes.get(line);
      return [plain(text), String(height), node ? String(node.x) : "", node ? String(node.p) : ""];
    }),
  );
}

function plain(text: string): string {
  return text.trim().replace(/^[\u2212\u2013]/, "-");
}
