import type { Browser, Locator, Page } from "playwright-core";

import { SIZE_NAMES, openBrowser, openPage, signIn, type WatchedPage } from "./support/browser";
import { DEMONSTRATION_PASSWORD, startFogline, type Fogline } from "./support/fogline";
import { ask, emptyDraft } from "./support/people";
import { button, entry, heading, visit } from "./support/steps";

const CONTRIBUTOR = "contributor@fogline.example";
const EDITOR = "editor@fogline.example";

let fogline: Fogline;
let browser: Browser;

beforeAll(async () => {
  fogline = await startFogline();
  browser = await openBrowser();
});

afterAll(async () => {
  await browser?.close();
  await fogline?.stop();
});

const focused = (target: Locator): Promise<boolean> =>
  target.evaluate((element) => element === document.activeElement);

/** Presses Tab until the focus is where it is wanted; a page must not need more than `presses`. */
async function tabTo(page: Page, target: Locator, presses = 80): Promise<void> {
  await target.waitFor();
  for (let pressed = 0; pressed < presses; pressed++) {
    if (await focused(target)) return;
    await page.keyboard.press("Tab");
  }
  throw new Error(`Tab does not reach ${target}`);
}

/** Goes to an entry by Tab and types into it. */
async function typeInto(page: Page, label: string, text: string): Promise<void> {
  await tabTo(page, entry(page, label));
  await page.keyboard.type(text);
}

/** Goes to a select by Tab and finds a choice by its first letters, as browsers let one. */
async function chooseBy(page: Page, label: string, letters: string, value: string): Promise<void> {
  const select = entry(page, label);
  await tabTo(page, select);
  await page.keyboard.type(letters);
  expect(await select.inputValue()).toBe(value);
}

/** Goes to a group of radios by Tab and along it by arrow keys. */
async function chooseRadio(page: Page, group: string, word: string): Promise<void> {
  const radios = page.getByRole("radiogroup", { name: group, exact: true });
  const wanted = radios.getByRole("radio", { name: word, exact: true });
  await radios.waitFor();
  for (let pressed = 0; pressed < 80; pressed++) {
    if (await radios.evaluate((element) => element.contains(document.activeElement))) break;
    await page.keyboard.press("Tab");
  }
  await page.keyboard.press("Space");
  for (let pressed = 0; pressed < 6 && !(await wanted.isChecked()); pressed++)
    await page.keyboard.press("ArrowRight");
  expect(await wanted.isChecked()).toBe(true);
}

describe.each(SIZE_NAMES)("by keyboard alone on a %s screen", (size) => {
  let opened: WatchedPage;
  let page: Page;

  beforeEach(async () => {
    opened = await openPage(browser, fogline, { size });
    page = opened.page;
  });

  afterEach(async () => {
    const { problems } = opened;
    await opened.close();
    expect(problems).toEqual([]);
  });

  it("skips to the content", async () => {
    await visit(page, "/", "History");
    await page.keyboard.press("Tab");
    expect(await focused(page.getByRole("link", { name: "Skip to the content" }))).toBe(true);
    await page.keyboard.press("Enter");
    expect(await focused(page.locator("#content"))).toBe(true);
  });

  it("signs in", async () => {
    await visit(page, "/account/sign-in?next=%2Fdesk", "Sign in");
    await typeInto(page, "Mail address", CONTRIBUTOR);
    await typeInto(page, "Password", DEMONSTRATION_PASSWORD);
    await page.keyboard.press("Enter");
    await heading(page, "Desk").waitFor();
  });

  it("moves a slider by arrow keys, and the readouts follow", async () => {
    await visit(page, "/", "History");
    await page.locator("[data-point]").first().waitFor();
    if (size === "phone") {
      await tabTo(page, button(page, "Model histories"));
      await page.keyboard.press("Enter");
    }
    const slider = page.getByRole("slider").first();
    await tabTo(page, slider);
    // The midpoint of a tanh history is the redshift that its first slider moves.
    const readouts = page
      .getByRole("table", { name: "Readouts of the model histories" })
      .or(page.locator("dl").filter({ hasText: "Midpoint" }));
    const before = Number(await slider.inputValue());
    await readouts.getByText(before.toFixed(2), { exact: true }).first().waitFor();
    for (let press = 0; press < 10; press++) await page.keyboard.press("ArrowRight");
    const after = Number(await slider.inputValue());
    expect(after).toBeGreaterThan(before);
    await readouts.getByText(after.toFixed(2), { exact: true }).first().waitFor();
  });

  it("walks to a point of the chart, opens it, and comes back to it with Escape", async () => {
    await visit(page, "/", "History");
    const first = page.locator("[data-point][tabindex='0']");
    await tabTo(page, first);
    await page.keyboard.press("ArrowRight");
    const number = await page.evaluate(() => document.activeElement?.getAttribute("data-point"));
    expect(number).toMatch(/^FL-\d+$/);
    await page.keyboard.press("Enter");
    const sheet = page.getByRole("region", { name: new RegExp(`^Point ${number}`) });
    await sheet.waitFor();
    await page.waitForFunction(() =>
      document.activeElement?.closest("[role=region][aria-label^=Point]"),
    );
    await page.keyboard.press("Escape");
    await sheet.waitFor({ state: "detached" });
    await page.waitForFunction(
      (wanted) => document.activeElement?.getAttribute("data-point") === wanted,
      number,
    );
  });

  it("keeps the focus in an open sheet, and gives it back at Escape", async () => {
    await visit(page, "/constraints/FL-0002", "Constraint");
    const cite = button(page, "Cite");
    await tabTo(page, cite);
    await page.keyboard.press("Enter");
    const sheet = page.getByRole("dialog");
    await sheet.waitFor();
    expect(await sheet.evaluate((element) => element.contains(document.activeElement))).toBe(true);
    for (let press = 0; press < 12; press++) await page.keyboard.press("Tab");
    expect(await sheet.evaluate((element) => element.contains(document.activeElement))).toBe(true);
    await page.keyboard.press("Escape");
    await sheet.waitFor({ state: "detached" });
    expect(await focused(cite)).toBe(true);
  });

  it("chooses the statement and types it in a draft", async () => {
    await signIn(page, CONTRIBUTOR);
    await visit(
      page,
      `/desk/submit/${await emptyDraft(page.context().request)}?step=printed`,
      "What the paper prints",
    );
    await chooseBy(page, "Quantity", "Neu", "neutralFraction");
    await chooseRadio(page, "Fraction as printed", "Ionized");
    await chooseRadio(page, "Statement", "upper");
    await typeInto(page, "Limit", "0.66");
    await chooseBy(page, "Level", "95", "percent95");
    await page.getByText(/^Saved \d\d:\d\d$/).waitFor();
    const preview = page.getByRole("region", { name: "As it will read" });
    expect(await preview.innerText()).toContain("0.66");
  });

  it("claims, reads again and stores the reading", async () => {
    await signIn(page, EDITOR);
    const { queue } = await ask<{
      queue: {
        id: string;
        ordinal: number;
        barredBecause: string | null;
        claimedUntil: string | null;
      }[];
    }>(page.context().request, "{ queue { id ordinal barredBecause claimedUntil } }");
    const free = queue.find(
      (item) => !item.barredBecause && !item.claimedUntil && item.ordinal === 1,
    );
    await visit(page, `/desk/review/${free!.id}`, "Second reading");
    await tabTo(page, button(page, "Claim for a second reading"));
    await page.keyboard.press("Enter");
    await chooseBy(page, "Quantity", "Neu", "neutralFraction");
    await chooseRadio(page, "Fraction as printed", "Neutral");
    await chooseRadio(page, "Statement", "lower");
    await typeInto(page, "Limit", "0.09");
    await chooseBy(page, "Level", "95", "percent95");
    await typeInto(page, "Redshift", "8.15");
    await chooseBy(page, "Role of the redshift", "Poi", "point");
    await chooseBy(page, "Weighting", "Vol", "volume");
    await chooseBy(page, "Scale", "Lin", "linear");
    await tabTo(page, button(page, "Choose the methods"));
    await page.keyboard.press("Enter");
    const sheet = page.getByRole("dialog");
    await typeInto(page, "Search the methods", "power spectrum");
    const method = sheet.getByRole("checkbox").first();
    await tabTo(page, method);
    await page.keyboard.press("Space");
    expect(await method.isChecked()).toBe(true);
    await page.keyboard.press("Escape");
    await sheet.waitFor({ state: "detached" });
    await tabTo(page, button(page, "Store my reading"));
    await page.keyboard.press("Enter");
    await page.getByRole("table", { name: "Your reading beside the submission" }).waitFor();
  });
});
