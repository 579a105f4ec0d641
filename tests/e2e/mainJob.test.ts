import Papa from "papaparse";
import type { Browser, Page } from "playwright-core";

import { SIZE_NAMES, openBrowser, openPage, screenshot, signIn } from "./support/browser";
import { startFogline, type Fogline } from "./support/fogline";
import {
  button,
  chooseMethod,
  entry,
  heading,
  link,
  pageWords,
  signInByForm,
  startDraft,
  submitChecked,
  tickChecklist,
  typeOrigin,
  typeStatement,
  takeProposals,
  visit,
} from "./support/steps";

const PASSWORD = "a lamp over the ridge";
const NAME = "Ilmar Thessing";
const MAINTAINER = "maintainer@fogline.example";
const EDITOR = "editor@fogline.example";

// Invented, with a DOI under the prefix reserved for examples. What it prints is in PRINTED.
const BIBTEX = `@article{thessing26,
  author = {Thessing, Ilmar and Korvald, {\\O}. and {Lanternmoor Team}},
  title = {A damping wing above the {Lanternmoor} ridge},
  journal = {Journal of Distant Weather},
  year = 2026, volume = 44, pages = {301--322},
  doi = {https://doi.org/10.5555/jdw.2026.0301}
}`;
const PRINTED = { value: "0.40", plus: "0.17", minus: "0.11", redshift: "7.19" };
const PRINTED_TEXT = "we infer a neutral fraction of 0.40 +0.17 -0.11 at z = 7.19";
const COMMENT = "I read 0.11 in the table, and again in the abstract.";
/** The slip of the main job: the upper error typed twice. */
const SLIP = { ...PRINTED, minus: "0.17" };

describe.each(SIZE_NAMES)("the main job on a %s screen", (size) => {
  const email = `ilmar.${size}@lanternmoor.example`;
  let fogline: Fogline;
  let browser: Browser;
  const problems: string[] = [];
  const closes: (() => Promise<void>)[] = [];
  let contributor: Page;
  let editor: Page;
  /** All that the server said to the editor's browser. */
  const heard: Promise<string>[] = [];
  let number: string;
  let slug: string;
  let broken = false;

  /** One step of the walk; none is tried once one has failed. */
  const step = (name: string, walk: () => Promise<void>) =>
    it(name, async () => {
      if (broken) throw new Error("An earlier step failed.");
      broken = true;
      await walk();
      broken = false;
    });
  const open = async (): Promise<Page> => {
    const opened = await openPage(browser, fogline, { size });
    closes.push(async () => {
      problems.push(...opened.problems);
      await opened.close();
    });
    return opened.page;
  };
  const look = (page: Page, name: string) => screenshot(page, `job-${size}-${name}`);

  beforeAll(async () => {
    fogline = await startFogline();
    browser = await openBrowser();
    contributor = await open();
    editor = await open();
    editor.on("response", (response) => {
      if (new URL(response.url()).pathname === "/graphql")
        heard.push(response.text().catch(() => ""));
    });
  });

  afterAll(async () => {
    await browser?.close();
    await fogline?.stop();
  });

  step(
    "registers, and confirms through the mail a maintainer finds among the caught ones",
    async () => {
      await visit(contributor, "/account/register", "Register");
      await entry(contributor, "Name as on papers").fill(NAME);
      await entry(contributor, "Mail address").fill(email);
      await entry(contributor, "Password").fill(PASSWORD);
      await button(contributor, "Register").click();
      await heading(contributor, "Look for the mail").waitFor();

      const [mail] = await fogline.mailsTo(email);
      const address = fogline.linkIn(mail!);
      const maintainer = await open();
      await signIn(maintainer, MAINTAINER);
      await visit(maintainer, "/desk/mail", "Caught mail");
      await link(maintainer, `${fogline.url}${address}`).waitFor();

      await visit(contributor, address, "Confirm your address");
      await button(contributor, "Confirm my address").click();
      await heading(contributor, "Address confirmed").waitFor();
      await signInByForm(contributor, email, PASSWORD);
      await heading(contributor, "Desk").waitFor();
      expect(await button(contributor, "New constraint").count()).toBe(0);
      expect(await link(contributor, "New constraint").count()).toBe(0);

      await visit(maintainer, "/desk/people", "People");
      await entry(maintainer, "Search by name or address").fill(email);
      await button(maintainer, `Grant ${NAME} the contributor role`).click();
      await button(maintainer.getByRole("dialog"), "Grant the role").click();
      await maintainer.getByText(`${NAME} is a contributor now.`).waitFor();
      await look(maintainer, "01-people");
    },
  );

  step("submits a constraint with pasted BibTeX in four steps, with a slip in it", async () => {
    await startDraft(contributor, BIBTEX);
    await typeStatement(contributor, SLIP);
    await entry(contributor, "Exact printed text").fill(PRINTED_TEXT);
    await look(contributor, "02-printed");
    const preview = contributor.getByRole("region", { name: "As it will read" });
    expect(await preview.innerText()).toContain("0.40");
    await button(contributor, "Method and data").click();
    await typeOrigin(contributor, {
      method: "Quasar damping wing",
      data: "Lanternmoor quasar 12",
      place: "Table 4, row 2",
    });
    await look(contributor, "03-method");
    await button(contributor, "Check").click();
    await submitChecked(contributor);
    await look(contributor, "04-submitted");
    number = (await heading(contributor, /^FL-\d+$/).innerText()).trim();
  });

  step(
    "shows the editor the paper and none of the numbers before the reading is stored",
    async () => {
      await signIn(editor, EDITOR);
      await visit(editor, "/desk/queue", "Queue");
      await link(editor, new RegExp(`^${number}\\b.*Thessing`)).click();
      await button(editor, "Claim for a second reading").waitFor();
      await look(editor, "05-claim");
      const words = [await pageWords(editor)];
      await button(editor, "Claim for a second reading").click();
      await entry(editor, "Quantity").waitFor();
      words.push(await pageWords(editor));
      await look(editor, "06-reading");

      const said = [...words, ...(await Promise.all(heard))].join("\n");
      expect(said).toContain("A damping wing above the Lanternmoor ridge");
      expect(said).not.toMatch(/\b(0\.40|0\.17|0\.11|7\.19)\b/);
      expect(said).not.toContain("we infer");
    },
  );

  step(
    "finds that minus differs, blocks the approval and returns with a comment at the field",
    async () => {
      await typeStatement(editor, PRINTED);
      await chooseMethod(editor, "Quasar damping wing");
      await look(editor, "07-typed");
      await button(editor, "Store my reading").click();

      const table = editor.getByRole("table", { name: "Your reading beside the submission" });
      await table.waitFor();
      await look(editor, "08-compared");
      expect(await table.getByText("differs", { exact: true }).count()).toBe(1);
      expect(await button(table, "Read this field again: Minus").count()).toBe(1);
      const approve = button(editor, "Approve");
      expect(await approve.getAttribute("aria-disabled")).toBe("true");

      await button(table, "Return with a comment at Minus").click();
      const comment = editor.getByRole("group", { name: "Comment 1" });
      expect(await entry(comment, "At the field").inputValue()).toBe("minus");
      await entry(comment, "Comment").fill(COMMENT);
      await look(editor, "09-returning");
      await button(editor, "Return to contributor").click();
      await button(editor.getByRole("dialog"), "Return it").click();
      await link(editor, "To the queue").waitFor();
    },
  );

  step("lets the contributor see the comment at the field, correct it and resubmit", async () => {
    await fogline.mailsTo(email, 2);
    await visit(contributor, "/desk", "Desk");
    await look(contributor, "10-desk");
    await contributor
      .getByRole("list", { name: "Returned to you" })
      .getByRole("link", { name: new RegExp(`^${number}`) })
      .click();
    await button(contributor, "Answer with a new revision").click();
    await button(contributor, "Go to the comment at Minus").click();
    // The least part of the form that holds the field and the comment: the number and its errors.
    const atField = contributor
      .locator("div")
      .filter({ has: contributor.locator("#field-minus") })
      .filter({ hasText: COMMENT })
      .last();
    await atField.waitFor();
    expect(await atField.locator("#field-plus, #field-level, #field-z").count()).toBe(1);
    await look(contributor, "11-comment");
    await entry(atField, "− minus").fill(PRINTED.minus);
    await entry(atField, "Your answer").fill("The upper error, typed twice. It is 0.11.");
    await button(contributor, "Step 4, Check").click();
    await look(contributor, "12-check");
    await submitChecked(contributor);
  });

  step("asks the editor for the changed field alone, and approves", async () => {
    await visit(editor, "/desk/queue", "Queue");
    await link(editor, new RegExp(`^${number}\\b.*Thessing`)).click();
    await button(editor, "Claim for a second reading").click();
    await entry(editor, "Minus").waitFor();
    expect(await entry(editor, "Quantity").count()).toBe(0);
    expect(await entry(editor, "Value").count()).toBe(0);
    expect(await button(editor, "Store my reading").getAttribute("aria-disabled")).toBe("true");
    await look(editor, "13-again");
    await entry(editor, "Minus").fill(PRINTED.minus);
    await button(editor, "Store my reading").click();
    await editor.getByText(/^\d+ fields, all the same$/).waitFor();
    for (const accept of await button(editor, "Accept the answer").all()) await accept.click();
    await tickChecklist(editor);
    await look(editor, "14-decide");
    const approve = button(editor, "Approve");
    await approve.and(editor.locator(":not([aria-disabled=true])")).click();
    await link(editor, "To the queue").waitFor();
  });

  step("puts the point into the chart, which the filter keeps", async () => {
    await visit(contributor, "/", "History");
    const point = contributor.locator(`[data-point="${number}"]`);
    await point.waitFor();
    expect(await point.getAttribute("aria-label")).toMatch(/z = 7\.19.*0\.40.*0\.17.*0\.11/);
    await look(contributor, "15-history");

    await button(contributor, "Filter").click();
    const sheet = contributor.getByRole("dialog");
    await button(sheet, "Damping wing").click();
    await entry(sheet, "Redshift from").fill("6");
    await entry(sheet, "to").first().fill("8");
    await entry(sheet, "to").first().press("Enter");
    await button(sheet, "Show the chart").click();
    await contributor.waitForURL(
      (url) =>
        url.searchParams.get("family") === "dampingWing" && url.searchParams.get("z") === "6-8",
    );
    await point.waitFor();
    await look(contributor, "16-filtered");
  });

  step("saves a fitting table of damping wings from redshift 6 to 8", async () => {
    await visit(contributor, "/tables", "Tables");
    await link(contributor, "New table").click();
    await heading(contributor, "New table").waitFor();
    await button(contributor, "Damping wing").click();
    await entry(contributor, "Redshift from").fill("6");
    await entry(contributor, "to").first().fill("8");
    await entry(contributor, "to").first().press("Enter");
    if (size === "phone") await button(contributor, "See the rows").click();
    await contributor.waitForURL((url) => url.searchParams.get("z") === "6-8");
    await contributor
      .getByText(/Family: damping wing; redshift 6 to 8/)
      .first()
      .waitFor();
    await button(contributor, /^Thessing.*7\.19.*in$/).waitFor();
    await look(contributor, "17-builder");
    if (size === "phone") await button(contributor, "To the decisions").click();
    await takeProposals(contributor);
    if (size === "phone") await button(contributor, "To save it").click();
    await entry(contributor, "Name of the table").fill("Wings over the ridge");
    await button(contributor, "Save the table").click();
    await heading(contributor, "Wings over the ridge").waitFor();
    await look(contributor, "18-table");
    slug = new URL(contributor.url()).pathname.split("/").pop()!;
  });

  step("hands the table to a stranger as CSV, with the row and its citation key", async () => {
    const response = await fetch(`${fogline.url}/api/tables/${slug}.csv`);
    expect(response.status).toBe(200);
    const text = await response.text();
    const { data } = Papa.parse<Record<string, string>>(text, { header: true, comments: "#" });
    const row = data.find((one) => Object.values(one).some((cell) => cell.startsWith(number)));
    expect(row).toBeDefined();
    const key = /@article\{([^,]+),/.exec(
      await (await fetch(`${fogline.url}/api/constraints/${number}.bib`)).text(),
    )?.[1];
    expect(key).toMatch(/[Tt]hessing/);
    expect(Object.values(row!)).toEqual(expect.arrayContaining([key, "0.40", "0.17", "0.11"]));
  });

  step(
    "shows no console error and no refusal by the content security policy on the way",
    async () => {
      for (const close of closes) await close();
      expect(problems).toEqual([]);
    },
  );
});
