import type { Locator, Page } from "playwright-core";

/** What a person types of one statement, by the label it stands under in the form. */
export interface Statement {
  value: string;
  plus: string;
  minus: string;
  redshift: string;
}

export function heading(page: Page, name: string | RegExp): Locator {
  return page.getByRole("heading", { level: 1, name });
}

export function button(within: Page | Locator, name: string | RegExp): Locator {
  return within.getByRole("button", { name, exact: typeof name === "string" });
}

export function link(within: Page | Locator, name: string | RegExp): Locator {
  return within.getByRole("link", { name, exact: typeof name === "string" });
}

export function entry(within: Page | Locator, label: string): Locator {
  return within.getByLabel(label, { exact: true });
}

/** Touches one of a few words side by side; the radio lies under its word. */
export async function segment(within: Page | Locator, group: string, word: string): Promise<void> {
  const radios = within.getByRole("radiogroup", { name: group, exact: true });
  await radios.getByText(word, { exact: true }).click();
  await radios.getByRole("radio", { name: word, exact: true, checked: true }).waitFor();
}

/** Goes to an address and waits for the page's heading. */
export async function visit(page: Page, address: string, title: string | RegExp): Promise<void> {
  await page.goto(address);
  await heading(page, title).waitFor();
}

/** Signs in as people do. */
export async function signInByForm(page: Page, email: string, password: string): Promise<void> {
  await visit(page, "/account/sign-in?next=%2Fdesk", "Sign in");
  await entry(page, "Mail address").fill(email);
  await entry(page, "Password").fill(password);
  await button(page, "Sign in").click();
  await heading(page, "Desk").waitFor();
}

/** Starts a draft from pasted BibTeX, and stands at its second step. */
export async function startDraft(page: Page, bibtex: string): Promise<void> {
  await visit(page, "/desk/submit/new", "The paper");
  await entry(page, "BibTeX").fill(bibtex);
  await button(page, /^Use /).click();
  await heading(page, "What the paper prints").waitFor();
}

/** A two-sided, volume-weighted neutral fraction at one redshift, as the form and the second reading ask for it. */
export async function typeStatement(page: Page, statement: Statement): Promise<void> {
  await entry(page, "Quantity").selectOption("neutralFraction");
  await segment(page, "Fraction as printed", "Neutral");
  await segment(page, "Statement", "value");
  await entry(page, "Value").fill(statement.value);
  await entry(page, "+ plus").fill(statement.plus);
  await entry(page, "− minus").fill(statement.minus);
  await entry(page, "Level").selectOption("oneSigma");
  await entry(page, "Estimator").selectOption("median");
  await entry(page, "Redshift").fill(statement.redshift);
  await entry(page, "Role of the redshift").selectOption("point");
  await entry(page, "Weighting").selectOption("volume");
  await entry(page, "Scale").selectOption("linear");
}

export async function chooseMethod(page: Page, name: string): Promise<void> {
  await button(page, /^(Choose|Change) the methods$/).click();
  const sheet = page.getByRole("dialog");
  await sheet.getByRole("checkbox", { name, exact: true }).check();
  await button(sheet, "Done").click();
  await sheet.waitFor({ state: "detached" });
  await button(page, `Remove ${name}`).waitFor();
}

/** The third step of a submission: method, data, place, version. */
export async function typeOrigin(
  page: Page,
  { method, data, place }: { method: string; data: string; place: string },
): Promise<void> {
  await heading(page, "Where it comes from").waitFor();
  await chooseMethod(page, method);
  await entry(page, "Sightlines, fields and samples").fill(data);
  await entry(page, "Sightlines, fields and samples").press("Enter");
  await button(page, `Remove ${data}`).waitFor();
  await entry(page, "Table, row or section").fill(place);
  await entry(page, "Version read").selectOption("published");
}

/** The last step: every finding that asks is answered, the licence is agreed to. */
export async function submitChecked(page: Page): Promise<void> {
  await heading(page, "Check and submit").waitFor();
  await page.getByText("Comparing with the records of the registry").waitFor({ state: "detached" });
  const answers = entry(page, "Your answer");
  for (let at = 0; at < (await answers.count()); at++)
    await answers.nth(at).fill("It stands so in the paper; its own spectrum, read anew.");
  await page.getByRole("checkbox", { name: /data licence/ }).check();
  await button(page, "Submit for review").click();
  await page.getByText(/^FL-\d+ is submitted$/).waitFor();
}

/** Ticks every point of the second reading's checklist, one after the other. */
export async function tickChecklist(page: Page): Promise<void> {
  const list = page.getByRole("group", { name: "Checklist" });
  const points = list.getByRole("checkbox");
  const all = await points.count();
  for (let at = 0; at < all; at++) {
    await points.nth(at).click();
    await list.getByText(`${at + 1} of ${all} ticked`, { exact: false }).waitFor();
  }
}

/** What a person sees or hears on the page, with everything typed into it. */
export function pageWords(page: Page): Promise<string> {
  return page.evaluate(() => {
    const spoken = Array.from(
      document.querySelectorAll("[aria-label], [aria-valuetext], [title]"),
    ).map((element) =>
      ["aria-label", "aria-valuetext", "title"]
        .map((name) => element.getAttribute(name) ?? "")
        .join(" "),
    );
    const typed = Array.from(document.querySelectorAll("input, textarea, select")).map(
      (element) => (element as HTMLInputElement).value,
    );
    return [document.body.innerText, ...spoken, ...typed].join("\n");
  });
}

/** Takes every proposal of a table being built, until no decision is open. */
export async function takeProposals(page: Page): Promise<void> {
  const none = page.getByText("None open");
  const take = button(page, /^Take (it|all \d+) as proposed$/);
  // Taking one can bring the next question up.
  for (let round = 0; round < 5; round += 1) {
    await take.or(none).first().waitFor();
    if (await none.isVisible()) return;
    const before = await page.getByText(/^\d+ open$/).textContent();
    await take.click();
    await page.waitForFunction(
      (words) => !document.body.innerText.includes(words ?? "\u0000"),
      before,
    );
  }
}
