import type { Page } from "playwright-core";

import { button, entry, visit } from "./steps";

/** Screens of the method vocabulary. None of them changes it: others look at its records. */
export const VOCABULARY_SCREENS = [
  {
    who: "nobody",
    name: "methods",
    async go(page: Page) {
      await visit(page, "/methods", "Methods");
      await page.getByRole("heading", { name: "Quasar damping wing", exact: true }).waitFor();
    },
  },
  {
    who: "nobody",
    name: "methods, one of them named in the address",
    async go(page: Page) {
      await visit(page, "/methods?method=darkGaps", "Methods");
      await page.getByRole("heading", { name: "Dark gaps", exact: true }).waitFor();
    },
  },
  {
    who: "nobody",
    name: "method vocabulary without an account",
    async go(page: Page) {
      await visit(page, "/desk/vocabulary", "Method vocabulary");
      await page.getByText("Sign in first").waitFor();
    },
  },
  {
    who: "maintainer",
    name: "method vocabulary",
    async go(page: Page) {
      await visit(page, "/desk/vocabulary", "Method vocabulary");
      await button(page, "Add a method").waitFor();
    },
  },
  {
    who: "maintainer",
    name: "method vocabulary, a method refused",
    async go(page: Page) {
      await button(page, "Add a method").click();
      await entry(page, "Tag").fill("Not one word");
      await entry(page, "Family").selectOption("other");
      await button(page, "Add the method").click();
      await page.getByText(/^A tag is one word in camelCase/).waitFor();
    },
  },
  {
    who: "maintainer",
    name: "method vocabulary, asked whether to move a family",
    async go(page: Page) {
      await visit(page, "/desk/vocabulary", "Method vocabulary");
      await button(page, "Edit Mean free path").click();
      await entry(page, "Family").selectOption("other");
      await button(page, "Save").click();
      await page.getByText("Move Mean free path to Other?").waitFor();
    },
  },
  {
    who: "maintainer",
    name: "method vocabulary, retiring a method",
    async go(page: Page) {
      await visit(page, "/desk/vocabulary", "Method vocabulary");
      await button(page, "Retire Near zones").click();
      await entry(page, "Taken over by").selectOption("darkGaps");
      await page.getByText(/will be shown and found under Dark gaps/).waitFor();
    },
  },
] as const;
