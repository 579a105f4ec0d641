import { compilableBibtex } from "~server/citation/export";
import { HttpProblem } from "~server/common/errors";
import { findApproved, findApprovedByNumber } from "~server/constraint/constraint.query";
import type { RouteInstaller } from "~server/routes";
import { constraintsCsv } from "~shared/formats/constraintCsv";
import { curveCsv } from "~shared/formats/curveCsv";
import { formatRecordNumber, parseRecordNumber } from "~shared/identifiers/recordNumber";

import { bibliographyLines, exportRow, listHeader } from "./header";
import { downloadParams } from "./params";
import { sendFile } from "./send";

/** More than any registry of this kind holds; a bound all the same. */
const MOST_ROWS = 20_000;

/**
 * GET /api/constraints.csv, /api/constraints.bib, /api/constraints/FL-0042.bib and
 * /api/constraints/FL-0042/curve.csv, for anybody.
 */
export const constraintDownloads: RouteInstaller = (router, parts) => {
  router.get("/api/constraints.csv", async (req, res) => {
    const { filter, sort } = downloadParams(req.query);
    const ctx = await parts.context(req, res);
    const header = await listHeader(ctx, filter);
    const rows = await findApproved(ctx, filter, sort ?? "redshift", 0, MOST_ROWS);
    sendFile(res, "fogline-constraints", "csv", constraintsCsv(rows.map(exportRow), header));
  });

  router.get("/api/constraints.bib", async (req, res) => {
    const { filter, sort } = downloadParams(req.query);
    const ctx = await parts.context(req, res);
    const header = await listHeader(ctx, filter);
    const rows = await findApproved(ctx, filter, sort ?? "redshift", 0, MOST_ROWS);
    const lines = bibliographyLines(header, `papers behind “${header.filter}”`);
    const citations = rows.map((row) => row.citation);
    sendFile(res, "fogline-constraints", "bib", compilableBibtex(citations, lines));
  });

  router.get("/api/constraints/:number/curve.csv", async (req, res) => {
    const ctx = await parts.context(req, res);
    const number = parseRecordNumber(req.params.number);
    const row = number === null ? null : await findApprovedByNumber(ctx, number);
    const content = row && curveCsv(exportRow(row), await listHeader(ctx, {}));
    if (!row || !content) {
      throw new HttpProblem(
        404,
        "NOT_FOUND",
        "There is no approved record of this number with a curve.",
      );
    }
    sendFile(res, `${formatRecordNumber(row.constraint.id)}-curve`, "csv", content);
  });

  router.get("/api/constraints/:number.bib", async (req, res) => {
    const ctx = await parts.context(req, res);
    const number = parseRecordNumber(req.params.number);
    const row = number === null ? null : await findApprovedByNumber(ctx, number);
    if (!row) {
      throw new HttpProblem(404, "NOT_FOUND", "There is no approved record of this number.");
    }
    const name = formatRecordNumber(row.constraint.id);
    const lines = bibliographyLines(await listHeader(ctx, {}), `the paper behind ${name}`);
    sendFile(res, name, "bib", compilableBibtex([row.citation], lines));
  });
};
