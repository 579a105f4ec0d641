import type { Page } from "playwright-core";

import { ask } from "./people";
import { button, entry, segment, visit } from "./steps";

const matrix = (page: Page) => page.getByRole("table", { name: /matrix/i }).first();

/** Screens of correlated sets, in an order in which each viewer can walk through them. */
export const SET_SCREENS = [
  {
    who: "nobody",
    name: "correlated set",
    async go(page: Page) {
      await visit(page, "/sets/FLS-0002", "Correlated set");
      await matrix(page).waitFor();
    },
  },
  {
    who: "nobody",
    name: "record in a correlated set",
    async go(page: Page) {
      await visit(page, "/constraints/FL-0022", "Constraint");
      await matrix(page).waitFor();
    },
  },
  {
    who: "nobody",
    name: "correlated set that does not exist",
    async go(page: Page) {
      await visit(page, "/sets/FLS-0999", "Correlated set");
      await page.getByText("No set FLS-0999").waitFor();
    },
  },
  {
    who: "contributor",
    name: "new correlated set",
    async go(page: Page) {
      const { correlatedSet } = await ask<{ correlatedSet: { citation: { id: string } } }>(
        page.context().request,
        '{ correlatedSet(number: "FLS-0003") { citation { id } } }',
      );
      await visit(page, `/desk/sets/new?paper=${correlatedSet.citation.id}`, "New correlated set");
      await button(page, "Type the matrix").waitFor();
    },
  },
  {
    who: "contributor",
    name: "correlated set, typed",
    async go(page: Page) {
      for (const number of ["FL-0001", "FL-0002"]) {
        await page.getByRole("checkbox", { name: new RegExp(number) }).check();
      }
      await button(page, "Type the matrix of 2").click();
      await segment(page, "Kind of matrix", "Correlations");
      await entry(page, "Row 2, column 1").fill("1.6");
      await page.getByText("a correlation lies between −1 and 1").waitFor();
    },
  },
  {
    who: "editor",
    name: "matrix, claim",
    async go(page: Page) {
      await visit(page, "/desk/set-review/FLS-0003", "Second reading");
      await button(page, "Claim and read").waitFor();
    },
  },
  {
    who: "editor",
    name: "matrix, typed",
    async go(page: Page) {
      await button(page, "Claim and read").click();
      await segment(page, "Kind of matrix", "Correlations");
      await entry(page, "Row 2, column 1").fill("0.24");
      await entry(page, "Row 3, column 1").fill("-0.21");
      await entry(page, "Row 3, column 2").fill("0.28");
    },
  },
  {
    who: "editor",
    name: "matrix, compared",
    async go(page: Page) {
      await button(page, "Store my reading").click();
      await button(page, "I misread it").waitFor();
    },
  },
] as const;
