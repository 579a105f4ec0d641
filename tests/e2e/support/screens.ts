import { readFileSync } from "node:fs";
import path from "node:path";

import type { Browser, Page } from "playwright-core";

import {
  SCHEMES,
  axeViolations,
  layoutProblems,
  layoutProblemsAtOtherSizes,
  openBrowser,
  openPage,
  screenshot,
  signIn,
  wear,
  type Size,
  type WatchedPage,
} from "./browser";
import { DEMONSTRATION_PASSWORD, startFogline, type Fogline } from "./fogline";
import { ask, newcomer } from "./people";
import { SET_SCREENS } from "./setScreens";
import { VOCABULARY_SCREENS } from "./vocabularyScreens";
import { button, chooseMethod, entry, heading, link, typeStatement, visit } from "./steps";

/** Who looks: a person of the demonstration, nobody, or somebody with every role in an empty registry. */
const VIEWERS = {
  nobody: null,
  reader: "reader@fogline.example",
  contributor: "contributor@fogline.example",
  secondContributor: "second-contributor@fogline.example",
  editor: "editor@fogline.example",
  maintainer: "maintainer@fogline.example",
  newcomer: null,
} as const;
type Viewer = keyof typeof VIEWERS;

interface Situation {
  who: Viewer;
  name: string;
  /** Leads the page there and waits for what marks it. */
  go(page: Page, size: Size): Promise<unknown>;
}

const shown = (page: Page, text: string | RegExp) =>
  page
    .getByText(text, { exact: typeof text === "string" })
    .first()
    .waitFor();
const dialog = (page: Page) => page.getByRole("dialog");

async function submissionOf(page: Page, state: string): Promise<string> {
  const { mySubmissions } = await ask<{
    mySubmissions: { id: string; state: string; answeredBy: string | null }[];
  }>(page.context().request, "{ mySubmissions { id state answeredBy } }");
  const found = mySubmissions.find((one) => one.state === state && !one.answeredBy);
  if (!found) throw new Error(`nobody's submission is ${state}`);
  return `/desk/submit/${found.id}`;
}

async function reviewOf(page: Page, wanted: "waiting" | "barred" | "mine"): Promise<string> {
  const { queue } = await ask<{
    queue: {
      id: string;
      ordinal: number;
      claimedUntil: string | null;
      claimedByMe: boolean;
      barredBecause: string | null;
    }[];
  }>(page.context().request, "{ queue { id ordinal claimedUntil claimedByMe barredBecause } }");
  const found = queue.find((item) =>
    wanted === "mine"
      ? item.claimedByMe
      : wanted === "barred"
        ? item.barredBecause !== null
        : item.barredBecause === null && item.claimedUntil === null && item.ordinal === 1,
  );
  if (!found) throw new Error(`no submission of the queue is ${wanted}`);
  return `/desk/review/${found.id}`;
}

async function recordWithEvidence(page: Page): Promise<string> {
  const { request } = page.context();
  const { constraints } = await ask<{ constraints: { constraints: { number: string }[] } }>(
    request,
    "{ constraints(limit: 200) { constraints { number } } }",
  );
  for (const { number } of constraints.constraints) {
    const { evidence } = await ask<{ evidence: unknown[] }>(
      request,
      `{ evidence(number: "${number}") { kind } }`,
    );
    if (evidence.length > 0) return `/constraints/${number}`;
  }
  throw new Error("no record of the demonstration keeps evidence");
}

const SAMPLES = path.join(__dirname, "../../fixtures/samples");
const sample = (name: string, mimeType: string) => ({
  name,
  mimeType,
  buffer: readFileSync(path.join(SAMPLES, name)),
});

const BIBTEX = `@article{kelter26,
  author = {Kelterborn, Sunniva and {\\O}rnefjeld, S.},
  title = {Fog over the {Lanternmoor} ridge at $z > 8$},
  journal = {Annals of Faint Light}, year = 2026, volume = 123, pages = {A9},
  doi = {10.5555/afl.2026.0009}
}
@article{broken, title = {No end`;

const NOBODY: Situation[] = [
  {
    who: "nobody",
    name: "history",
    async go(page) {
      await visit(page, "/", "History");
      await page.locator("[data-point]").first().waitFor();
    },
  },
  {
    who: "nobody",
    name: "history, filter open",
    async go(page) {
      await button(page, "Filter").click();
      await button(dialog(page), "Show the chart").waitFor();
    },
  },
  {
    who: "nobody",
    name: "history, a point open",
    async go(page) {
      await visit(page, "/?point=FL-0005", "History");
      await page.getByRole("region", { name: /^Point FL-0005/ }).waitFor();
      await button(page, "Cite").waitFor();
    },
  },
  {
    who: "nobody",
    name: "history, model histories",
    async go(page, size) {
      await visit(page, "/?axis=frequency&fraction=log", "History");
      if (size === "phone") await button(page, "Model histories").click();
      await button(page, "Add a history").click();
      await button(page, "A power law").click();
      await page
        .getByRole("group", { name: /^History power law/ })
        .nth(1)
        .waitFor();
    },
  },
  {
    who: "nobody",
    name: "history, download of the figure",
    async go(page) {
      await visit(page, "/", "History");
      await page.locator("[data-point]").first().waitFor();
      await button(page, "Download the figure").click();
      await dialog(page).waitFor();
    },
  },
  {
    who: "nobody",
    name: "history, points as a table",
    async go(page) {
      await visit(page, "/", "History");
      await button(page, "Show the points as a table").click();
      await page.getByRole("table", { name: "Constraints shown in the chart, as used" }).waitFor();
    },
  },
  {
    who: "nobody",
    name: "history, no row matches",
    async go(page) {
      await visit(page, "/?z=40-50", "History");
      await shown(page, "No row matches");
    },
  },
  {
    who: "nobody",
    name: "constraints",
    async go(page) {
      await visit(page, "/constraints", "Constraints");
      await shown(page, /^Vessarin/);
    },
  },
  {
    who: "nobody",
    name: "constraints, no row matches",
    async go(page) {
      await visit(page, "/constraints?q=lighthouse&family=dampingWing&z=6-8", "Constraints");
      await shown(page, "No row matches");
    },
  },
  {
    who: "nobody",
    name: "record with two revisions",
    async go(page) {
      await visit(page, "/constraints/FL-0002", "Constraint");
      await button(page, "Cite").waitFor();
    },
  },
  {
    who: "nobody",
    name: "record, how to cite it",
    async go(page) {
      await button(page, "Cite").click();
      await dialog(page).waitFor();
    },
  },
  {
    who: "nobody",
    name: "record, filter of the list",
    async go(page, size) {
      await visit(page, size === "wide" ? "/constraints/FL-0014" : "/constraints", /^Constraint/);
      await button(page, "Filter").click();
      await button(dialog(page), "Show the list").waitFor();
    },
  },
  {
    who: "nobody",
    name: "record of a limit with its own sigma",
    async go(page) {
      await visit(page, "/constraints/FL-0006", "Constraint");
      await button(page, "Cite").waitFor();
    },
  },
  {
    who: "nobody",
    name: "record of an optical depth",
    async go(page) {
      await visit(page, "/constraints/FL-0018", "Constraint");
      await button(page, "Cite").waitFor();
    },
  },
  {
    who: "nobody",
    name: "record that does not exist",
    async go(page) {
      await visit(page, "/constraints/FL-0999", "Constraint");
      await shown(page, "No record FL-0999");
    },
  },
  {
    who: "nobody",
    name: "tables",
    async go(page) {
      await visit(page, "/tables", "Tables");
      await shown(page, "Damping wings, 6 to 8");
    },
  },
  {
    who: "nobody",
    name: "table",
    async go(page, size) {
      await link(page, /^Damping wings, 6 to 8/).click();
      await heading(page, "Damping wings, 6 to 8").waitFor();
      const role = size === "phone" ? "list" : "table";
      await page.getByRole(role, { name: "Rows of the table" }).waitFor();
    },
  },
  {
    who: "nobody",
    name: "table that does not exist",
    async go(page) {
      await visit(page, "/tables/nowhere", "Fitting table");
      await shown(page, "No table at this address");
    },
  },
  {
    who: "nobody",
    name: "table builder",
    async go(page) {
      await visit(page, "/tables/new?family=dampingWing&z=6-8&with=FL-0002&step=rows", "New table");
      await button(page, /^.*, (in|out)$/)
        .first()
        .waitFor();
    },
  },
  {
    who: "nobody",
    name: "table builder, a row's sheet",
    async go(page) {
      await button(page, /^.*, in$/)
        .first()
        .click();
      await dialog(page).waitFor();
      await shown(page, "In the table");
      await button(dialog(page), "Take it out").click();
      await entry(page, "Why it is taken out").waitFor();
    },
  },
  {
    who: "nobody",
    name: "table builder, decisions",
    async go(page) {
      await visit(page, "/tables/new?step=decisions", "New table");
      await page.getByRole("radio").first().waitFor();
      await page
        .getByRole("radio", { name: /, with a reason$/ })
        .first()
        .check();
      await entry(page, "Why, in a few words").waitFor();
    },
  },
  {
    who: "nobody",
    name: "table builder, no row",
    async go(page) {
      await visit(page, "/tables/new?z=40-50&step=rows", "New table");
      await shown(page, "No row matches");
    },
  },
  {
    who: "nobody",
    name: "table builder, save",
    async go(page) {
      await visit(page, "/tables/new?step=save", "New table");
      await link(page, "Sign in to save").waitFor();
    },
  },
  {
    who: "nobody",
    name: "release",
    async go(page) {
      await visit(page, "/releases/2", "Release 2");
      await shown(page, "Cite it");
      await shown(page, "Difference");
    },
  },
  {
    who: "nobody",
    name: "table with decisions",
    async go(page) {
      await visit(page, "/tables", "Tables");
      await link(page, /^Everything that says how late/).click();
      await heading(page, "Everything that says how late").waitFor();
      await shown(page, "What would change");
    },
  },
  {
    who: "nobody",
    name: "release that does not exist",
    async go(page) {
      await visit(page, "/releases/99", "Release 99");
      await shown(page, "No release of this number");
    },
  },
  ...(
    [
      ["desk", "/desk", "Desk", "Reading, plotting and downloading need no account."],
      ["new constraint", "/desk/submit/new", "New constraint", "Sign in first"],
      ["second reading", "/desk/review/none", "Second reading", "Sign in first"],
      ["import", "/desk/import", "Import a file", "Sign in first"],
      ["people", "/desk/people", "People", "Sign in first"],
      ["mail", "/desk/mail", "Caught mail", "Sign in first"],
      ["event log", "/desk/log", "Event log", "Sign in first"],
      ["account", "/account", "Account", "Nobody is signed in"],
      ["sign in", "/account/sign-in", "Sign in", "Demonstration accounts"],
      ["register", "/account/register", "Register", "I have an account"],
      ["confirm, no token", "/account/confirm", "Confirm your address", "The address is not whole"],
      ["new password", "/account/reset", "A new password", "Send the mail"],
      ["new password, link", "/account/reset?token=x", /new password/i, "New password"],
      ["error reports", "/desk/reports", "Error reports", "Sign in first"],
      ["error report", "/desk/reports/none", "Error report", "Sign in first"],
      ["reporter's link, not whole", "/report/none", "Your error report", /opens no report/],
      ["person without a page", "/people/none", "A person", "No such page"],
      [
        "new address, no token",
        "/account/address",
        "Confirm your new address",
        "The address is not whole",
      ],
      ["objection", "/account/object?token=x", /^Object/, "Keep my address"],
      ["unknown address", "/nowhere/at/all", "Nothing at this address", /\/nowhere\/at\/all/],
    ] as const
  ).map(([name, address, title, mark]): Situation => ({
    who: "nobody",
    name,
    async go(page) {
      await visit(page, address, title);
      await shown(page, mark);
    },
  })),
  {
    who: "nobody",
    name: "sign in, refused",
    async go(page) {
      await visit(page, "/account/sign-in", "Sign in");
      await entry(page, "Mail address").fill("reader@fogline.example");
      await entry(page, "Password").fill("not this one, surely");
      await button(page, "Sign in").click();
      await page.getByRole("alert").waitFor();
    },
  },
  {
    who: "nobody",
    name: "register, refused",
    async go(page) {
      await visit(page, "/account/register", "Register");
      await entry(page, "Name as on papers").fill("Sunniva Kelterborn");
      await entry(page, "Mail address").fill("sunniva@lanternmoor.example");
      await entry(page, "Password").fill("short");
      await button(page, "Register").click();
      await page.locator("[aria-invalid=true]").waitFor();
    },
  },
  {
    who: "nobody",
    name: "confirm, refused",
    async go(page) {
      await visit(page, "/account/confirm?token=worn-out", "Confirm your address");
      await button(page, "Confirm my address").click();
      await page.getByRole("alert").waitFor();
    },
  },
  {
    who: "nobody",
    name: "author's link that opens nothing",
    async go(page) {
      await visit(page, "/check/made-up", "Check of a record");
      await shown(page, "This link opens nothing");
    },
  },
];

/** The record that gets reports here; the seed has none. */
const REPORTED = "FL-0005";

const REPORTS: Situation[] = [
  {
    who: "nobody",
    name: "record, reporting an error",
    async go(page) {
      await visit(page, `/constraints/${REPORTED}`, "Constraint");
      await button(page, "Report an error").click();
      await entry(page, "What is wrong").waitFor();
    },
  },
  {
    who: "nobody",
    name: "record, error reported",
    async go(page) {
      await entry(page, "What is wrong").fill(
        "Table 3 of the published version prints another number than this record says.",
      );
      await button(page, "Send the report").click();
      await link(page, "See the report").waitFor();
    },
  },
  {
    who: "nobody",
    name: "reporter's page, before the answer",
    async go(page) {
      await link(page, "See the report").click();
      await heading(page, "Your error report").waitFor();
      await shown(page, /Once the editors have answered/);
    },
  },
  {
    who: "editor",
    name: "error reports",
    async go(page) {
      await visit(page, `/desk/reports?q=${REPORTED}`, "Error reports");
      await page.getByRole("list", { name: "Waiting, oldest first" }).waitFor();
    },
  },
  {
    who: "editor",
    name: "error report, answering",
    async go(page) {
      await link(page, /prints another number/).click();
      await entry(page, "Answer or question").fill("Thank you. Which row of the table is it?");
      await button(page, "Send the answer").click();
      await shown(page, /The answer (is on its way|stands)/);
    },
  },
  {
    who: "editor",
    name: "error report, asked whether to close it",
    async go(page) {
      await entry(page, "What became of it").selectOption("noError");
      await button(page, "Close the report").click();
      await dialog(page).waitFor();
    },
  },
  {
    who: "nobody",
    name: "reporter's page, answered",
    async go(page) {
      await page.reload();
      await entry(page, "Your reply").waitFor();
    },
  },
  {
    who: "nobody",
    name: "person's page",
    async go(page) {
      await visit(page, "/constraints/FL-0002", "Constraint");
      await link(page, "Rosalka Wend").first().click();
      await page.getByRole("list", { name: "Entered" }).waitFor();
    },
  },
];

const READER: Situation[] = (
  [
    ["desk without a role", "/desk", "Desk", "Build a fitting table"],
    ["account", "/account", "Account", "Save the profile"],
    ["new constraint without the role", "/desk/submit/new", "New constraint", /submit constraints/],
    ["import without the role", "/desk/import", "Import a file", "Contributors import files"],
    ["people without the role", "/desk/people", "People", "Maintainers only"],
    ["event log without the role", "/desk/log", "Event log", "Maintainers only"],
    ["second reading without the role", "/desk/review/none", "Second reading", /Editors read/],
  ] as const
).map(([name, address, title, mark]) => ({
  who: "reader",
  name,
  async go(page) {
    await visit(page, address, title);
    await shown(page, mark);
  },
}));

/** Opens the form of a new token and fills it in. */
async function tokenForm(page: Page, name: string, password: string): Promise<void> {
  await visit(page, "/account", "Account");
  await button(page, "Make a token").click();
  const form = page.getByRole("form", { name: "Make a token" });
  await entry(form, "What uses it").fill(name);
  await form.getByRole("checkbox", { name: "Tables" }).check();
  await entry(form, "Your password").fill(password);
  await button(form, "Make the token").click();
}

const ACCOUNT: Situation[] = [
  {
    who: "reader",
    name: "account, a token refused",
    async go(page) {
      await tokenForm(page, "", "not this one, surely");
      await page
        .getByRole("form", { name: "Make a token" })
        .locator("[aria-invalid=true]")
        .waitFor();
    },
  },
  {
    who: "reader",
    name: "account, a token just made",
    async go(page) {
      await tokenForm(page, "nightly run on the cluster of the institute", DEMONSTRATION_PASSWORD);
      await page.getByRole("group", { name: "Your new token" }).waitFor();
    },
  },
  {
    who: "reader",
    name: "account, asked whether to revoke a token",
    async go(page) {
      await tokenForm(page, "plots", DEMONSTRATION_PASSWORD);
      await page.getByRole("group", { name: "Your new token" }).waitFor();
      await button(page, "Revoke plots").first().click();
      await dialog(page).waitFor();
    },
  },
  {
    who: "reader",
    name: "account, change of address refused",
    async go(page) {
      await visit(page, "/account", "Account");
      const form = page.getByRole("form", { name: "Change the address" });
      await entry(form, "New mail address").fill("sefa@lanternmoor.example");
      await entry(form, "Your password").fill("not this one, surely");
      await button(form, "Change the address").click();
      await form.locator("[aria-invalid=true]").waitFor();
    },
  },
  {
    who: "reader",
    name: "account, asked whether to sign out everywhere",
    async go(page) {
      await visit(page, "/account", "Account");
      await button(page, "Sign out everywhere").click();
      await dialog(page).waitFor();
    },
  },
  {
    who: "reader",
    name: "account, asked whether to delete it",
    async go(page) {
      await visit(page, "/account", "Account");
      const form = page.getByRole("form", { name: "Delete the account" });
      await form.getByRole("radio", { name: /a former member/ }).check();
      await button(form, "Delete the account").click();
      await dialog(page).waitFor();
    },
  },
];

const EVIDENCE_CLOSED: Situation = {
  who: "reader",
  name: "record with evidence that is not passed on",
  async go(page) {
    await visit(page, await recordWithEvidence(page), "Constraint");
    await shown(page, /under copyright/);
  },
};

const EVIDENCE_REFUSED: Situation = {
  who: "contributor",
  name: "where it comes from, a file refused",
  async go(page) {
    await visit(page, `${await submissionOf(page, "draft")}?step=method`, "Where it comes from");
    // The longest name of the vocabulary, whichever draft comes first.
    await chooseMethod(page, "Gamma-ray burst damping wing");
    const buffer = Buffer.alloc(10_000_001, "x");
    await page
      .locator("input[type=file]")
      .setInputFiles({ name: "paper.pdf", mimeType: "application/pdf", buffer });
    await shown(page, "paper.pdf is not attached");
  },
};

const atStep = (who: Viewer, name: string, step: string, title: string): Situation => ({
  who,
  name,
  async go(page) {
    await visit(page, `${await submissionOf(page, "draft")}?step=${step}`, title);
  },
});

const CONTRIBUTOR: Situation[] = [
  {
    who: "contributor",
    name: "desk of a contributor",
    async go(page) {
      await visit(page, "/desk", "Desk");
      await page.getByRole("list", { name: "Approved" }).waitFor();
    },
  },
  {
    who: "contributor",
    name: "new constraint, looked up",
    async go(page) {
      await visit(page, "/desk/submit/new", "The paper");
      await entry(page, "DOI or arXiv number").fill("https://doi.org/10.5555/les.2028.0017");
      await button(page, "Look it up").click();
      await button(page, /^Use Quarrelow/).waitFor();
    },
  },
  {
    who: "contributor",
    name: "new constraint, nothing looked up",
    async go(page) {
      await visit(page, "/desk/submit/new", "The paper");
      await entry(page, "DOI or arXiv number").fill("10.5555/nobody.knows");
      await button(page, "Look it up").click();
      await shown(page, /knows no paper by this number/);
    },
  },
  {
    who: "contributor",
    name: "new constraint, entries read",
    async go(page) {
      await visit(page, "/desk/submit/new", "The paper");
      await entry(page, "BibTeX").fill(BIBTEX);
      await button(page, /^Use Kelterborn/).waitFor();
    },
  },
  atStep("contributor", "draft, step 1", "paper", "The paper"),
  {
    who: "contributor",
    name: "draft, asked whether to discard it",
    async go(page) {
      await button(page, "Discard this draft").click();
      await dialog(page).waitFor();
    },
  },
  {
    who: "contributor",
    name: "draft, step 2 with slips",
    async go(page) {
      await visit(
        page,
        `${await submissionOf(page, "draft")}?step=printed`,
        "What the paper prints",
      );
      await typeStatement(page, { value: "O.42", plus: "0.21", minus: "0.06", redshift: "8.7" });
      await entry(page, "Redshift").blur();
      await page.locator("[aria-invalid=true]").first().waitFor();
      await shown(page, /^Saved \d\d:\d\d$/);
    },
  },
  atStep("contributor", "draft, step 3", "method", "Where it comes from"),
  {
    who: "contributor",
    name: "draft, methods of the vocabulary",
    async go(page) {
      await button(page, "Change the methods").click();
      await button(dialog(page), "Done").waitFor();
    },
  },
  {
    who: "contributor",
    name: "draft, step 4",
    async go(page) {
      await visit(page, `${await submissionOf(page, "draft")}?step=check`, "Check and submit");
      await page
        .getByText("Comparing with the records of the registry")
        .waitFor({ state: "detached" });
      await shown(page, /^Not yet: /);
    },
  },
  {
    who: "contributor",
    name: "submission that waits",
    async go(page) {
      await visit(page, await submissionOf(page, "submitted"), /^FL-/);
      await shown(page, /is submitted$/);
    },
  },
  {
    who: "contributor",
    name: "submission that is approved",
    async go(page) {
      await visit(page, await submissionOf(page, "approved"), /^FL-/);
      await shown(page, /is approved$/);
    },
  },
  {
    who: "contributor",
    name: "no such submission",
    async go(page) {
      await visit(page, "/desk/submit/00000000-0000-4000-8000-000000000000", "Submission");
      await shown(page, "No such submission");
    },
  },
  {
    who: "contributor",
    name: "import, files picked",
    async go(page) {
      await visit(page, "/desk/import", "Import a file");
      await page
        .getByLabel(/Pick the CSV file/)
        .setInputFiles(sample("group-list.csv", "text/csv"));
      await page
        .getByLabel(/Pick the \.bib file/)
        .setInputFiles(sample("group-list.bib", "application/x-bibtex"));
      await shown(page, "group-list.bib");
    },
  },
  {
    who: "contributor",
    name: "import, match",
    async go(page) {
      await button(page, "Read the files").click();
      await shown(page, "16 good, 4 refused, 0 already here");
    },
  },
  {
    who: "contributor",
    name: "import, preview",
    async go(page) {
      await button(page, "See the rows").click();
      await button(page, "Create 16 drafts").waitFor();
    },
  },
  {
    who: "contributor",
    name: "import, result",
    async go(page) {
      await button(page, "Create 16 drafts").click();
      await shown(page, "16 drafts are on your desk");
      await shown(page, /^4 rows were refused and 0 were already here/);
    },
  },
  {
    who: "contributor",
    name: "imported draft",
    async go(page) {
      await link(page, "Open the first draft").click();
      await heading(page, "What the paper prints").waitFor();
    },
  },
  {
    who: "secondContributor",
    name: "submission that was returned",
    async go(page) {
      await visit(page, await submissionOf(page, "returned"), /^FL-/);
      await shown(page, "Returned with comments");
    },
  },
  {
    who: "secondContributor",
    name: "draft that answers a return",
    async go(page) {
      await button(page, "Answer with a new revision").click();
      await button(page, "Go to the comment at Minus").waitFor();
    },
  },
  {
    who: "contributor",
    name: "my constraints, searched",
    async go(page) {
      await visit(page, "/desk/mine?show=approved", "My constraints");
      await page.getByRole("list", { name: "Approved" }).waitFor();
    },
  },
  {
    who: "contributor",
    name: "my constraints, none found",
    async go(page) {
      await entry(page, "Search by paper, number, place, method or data").fill("no such paper");
      await shown(page, "None of yours is like this");
    },
  },
];

const EDITOR: Situation[] = [
  {
    who: "editor",
    name: "desk of an editor",
    async go(page) {
      await visit(page, "/desk", "Desk");
      await page.getByRole("list", { name: "Waiting, oldest first" }).waitFor();
    },
  },
  {
    who: "editor",
    name: "second reading, claim",
    async go(page) {
      await visit(page, await reviewOf(page, "waiting"), "Second reading");
      await button(page, "Claim for a second reading").waitFor();
    },
  },
  {
    who: "editor",
    name: "second reading, before anything is read",
    async go(page) {
      await button(page, "Claim for a second reading").click();
      await entry(page, "Quantity").waitFor();
    },
  },
  {
    who: "editor",
    name: "second reading, typed",
    async go(page) {
      await typeStatement(page, { value: "0.03", plus: "0.02", minus: "0.01", redshift: "8.15" });
      await chooseMethod(page, "Quasar damping wing");
      await shown(page, /All that is asked is read\.$/);
    },
  },
  {
    who: "editor",
    name: "comparison",
    async go(page) {
      await button(page, "Store my reading").click();
      await page.getByRole("table", { name: "Your reading beside the submission" }).waitFor();
    },
  },
  {
    who: "editor",
    name: "comparison, a field read again",
    async go(page) {
      await button(page, /^Read this field again/)
        .first()
        .click();
      await entry(page, "Why you read it differently now").waitFor();
    },
  },
  {
    who: "editor",
    name: "comparison, returning",
    async go(page) {
      await button(page, "Return with comments").click();
      await entry(page, "Comment").fill("The lower error reads otherwise in the table.");
      await button(page, "Return to contributor").waitFor();
    },
  },
  {
    who: "editor",
    name: "returned",
    async go(page) {
      await button(page, "Return to contributor").click();
      await button(dialog(page), "Return it").click();
      await link(page, "To the queue").waitFor();
    },
  },
  {
    who: "editor",
    name: "queue",
    async go(page) {
      await visit(page, "/desk/queue", "Queue");
      await page.getByRole("list", { name: "Submissions" }).waitFor();
    },
  },
  {
    who: "editor",
    name: "queue, none found",
    async go(page) {
      await entry(page, "Search by author, title, number or place").fill("no such paper");
      await shown(page, "No submission is like this");
    },
  },
  {
    who: "editor",
    name: "second reading, handing over",
    async go(page) {
      await visit(page, "/desk", "Desk");
      await page.getByRole("list", { name: "Claimed by me" }).getByRole("link").first().click();
      await button(page, "Hand over").click();
      await dialog(page).getByRole("radio").first().waitFor();
    },
  },
  {
    who: "editor",
    name: "author checks",
    async go(page) {
      await visit(page, "/desk/author-checks", "Author checks");
      await page.getByRole("list", { name: "Answered and ended" }).waitFor();
    },
  },
  {
    who: "editor",
    name: "author check",
    async go(page) {
      await page
        .getByRole("list", { name: "Answered and ended" })
        .getByRole("link")
        .first()
        .click();
      await heading(page, "Author check").waitFor();
      await page.getByRole("list", { name: "Answers" }).waitFor();
    },
  },
  {
    who: "editor",
    name: "record, asking an author",
    async go(page) {
      await visit(page, "/constraints/FL-0002", "Constraint");
      await button(page, "Ask an author of the paper").click();
      await entry(page, "Author's name").waitFor();
    },
  },
];

const MAINTAINER: Situation[] = [
  {
    who: "maintainer",
    name: "desk of a maintainer",
    async go(page) {
      await visit(page, "/desk", "Desk");
      await link(page, /^Caught mail/).waitFor();
    },
  },
  {
    who: "maintainer",
    name: "people",
    async go(page) {
      await visit(page, "/desk/people", "People");
      await shown(page, "reader@fogline.example");
    },
  },
  {
    who: "maintainer",
    name: "people, asked whether to grant",
    async go(page) {
      await button(page, "Grant Sefa Lornhill the contributor role").click();
      await dialog(page).waitFor();
    },
  },
  {
    who: "maintainer",
    name: "people, nobody found",
    async go(page) {
      await visit(page, "/desk/people", "People");
      await entry(page, "Search by name or address").fill("nobody of this name");
      await shown(page, "Nobody has this name or address");
    },
  },
  {
    who: "maintainer",
    name: "event log, the digest of an event open",
    async go(page) {
      await visit(page, "/desk/log", "Event log");
      await button(page, /^Digest of event/)
        .first()
        .click();
      await button(page, /^All about/).waitFor();
    },
  },
  {
    who: "maintainer",
    name: "event log, filtered",
    async go(page) {
      await visit(page, "/desk/log?kind=revision.returned", "Event log");
      await shown(page, /events of this filter$/);
      await shown(page, /with comments/);
    },
  },
  {
    who: "maintainer",
    name: "event log, nothing found",
    async go(page, size) {
      await visit(page, "/desk/log?person=nobody", "Event log");
      await shown(page, "No event is like this");
      if (size === "phone") {
        await button(page, /^Filter/).click();
        await entry(dialog(page), "About").waitFor();
      }
    },
  },
  {
    who: "maintainer",
    name: "record with evidence",
    async go(page) {
      await visit(page, await recordWithEvidence(page), "Constraint");
      await page.getByRole("region", { name: "Evidence" }).getByRole("link").first().waitFor();
    },
  },
  {
    who: "maintainer",
    name: "mail",
    async go(page) {
      await visit(page, "/desk/mail", "Caught mail");
      await button(page, "Look again").waitFor();
    },
  },
];

const EMPTY: Situation[] = (
  [
    ["history", "/", "History", "No approved constraint yet"],
    ["constraints", "/constraints", "Constraints", "No constraint yet"],
    ["tables", "/tables", "Tables", "No fitting table yet"],
    ["table builder", "/tables/new?step=rows", "New table", "No row matches"],
    ["desk", "/desk", "Desk", "Nothing waits"],
    ["people", "/desk/people", "People", "Sunniva Kelterborn"],
    ["mail", "/desk/mail", "Caught mail", "Mails go out here"],
  ] as const
).map(([name, address, title, mark]) => ({
  who: "newcomer",
  name: `empty registry, ${name}`,
  async go(page) {
    await visit(page, address, title);
    await shown(page, mark);
  },
}));

const SITUATIONS = [
  ...NOBODY,
  ...REPORTS,
  ...READER,
  ...ACCOUNT,
  EVIDENCE_CLOSED,
  ...CONTRIBUTOR,
  EVIDENCE_REFUSED,
  ...EDITOR,
  ...SET_SCREENS,
  ...VOCABULARY_SCREENS,
  ...MAINTAINER,
  ...EMPTY,
];

/** Every screen at one size, as whoever sees it: whole, within reach of everybody, light and dark. */
export function describeScreens(size: Size): void {
  let browser: Browser;
  let empty: Fogline;
  let demonstration: Fogline;
  const pages = new Map<Viewer, WatchedPage>();

  beforeAll(async () => {
    browser = await openBrowser();
    empty = await startFogline({ demonstration: false });
    demonstration = await startFogline();
  });

  afterAll(async () => {
    for (const { close } of pages.values()) await close();
    await browser?.close();
    await demonstration?.stop();
    await empty?.stop();
  });

  async function pageOf(who: Viewer): Promise<WatchedPage> {
    const known = pages.get(who);
    if (known) return known;
    const opened = await openPage(browser, who === "newcomer" ? empty : demonstration, { size });
    pages.set(who, opened);
    if (who === "newcomer") {
      const { email } = await newcomer(opened.page.context().request, empty, [
        "contributor",
        "editor",
        "maintainer",
      ]);
      await signIn(opened.page, email, DEMONSTRATION_PASSWORD);
    } else if (VIEWERS[who]) await signIn(opened.page, VIEWERS[who]);
    return opened;
  }

  it.each(SITUATIONS.map(({ who, name }, index) => [who, name, index] as const))(
    "%s sees %s, whole and within reach of everybody, light and dark",
    async (who, name, index) => {
      const { page, problems } = await pageOf(who);
      problems.length = 0;
      await SITUATIONS[index]!.go(page, size);
      await page.waitForFunction(() => !document.querySelector("[aria-busy=true]"));
      const found: string[] = [];
      for (const scheme of SCHEMES) {
        await wear(page, scheme);
        await screenshot(page, `${size}-${who}-${name.replaceAll(/\W+/g, "-")}-${scheme}`);
        // A scheme changes colours and nothing else.
        const rules = scheme === "light" ? undefined : ["color-contrast"];
        found.push(...(await axeViolations(page, rules)).map((words) => `${scheme}: ${words}`));
      }
      await wear(page, "light");
      found.push(...(await layoutProblems(page)));
      // The phone's page is also looked at smaller, and as wide as an upright tablet.
      if (size === "phone")
        found.push(
          ...(await layoutProblemsAtOtherSizes(page, size, (other) =>
            screenshot(page, `${other}-${who}-${name.replaceAll(/\W+/g, "-")}`),
          )),
        );
      found.push(...problems);
      const first = await heading(page, /./).count();
      if (first !== 1) found.push(`${first} headings of the first level`);
      expect(found).toEqual([]);
    },
  );
}
