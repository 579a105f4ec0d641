import Papa from "papaparse";
import type { Browser, Page } from "playwright-core";

import { openBrowser, openPage, screenshot, signIn, SIZE_NAMES } from "./support/browser";
import { startFogline, type Fogline } from "./support/fogline";
import { button, entry, heading, link, takeProposals, visit } from "./support/steps";

const THEORIST = "reader@fogline.example";

/** From a filter to a complete table with five decisions and more, over the invented demonstration. */
describe.each(SIZE_NAMES)("a fitting table on a %s screen", (size) => {
  const phone = size === "phone";
  let fogline: Fogline;
  let browser: Browser;
  let page: Page;
  let close: () => Promise<void>;

  beforeAll(async () => {
    fogline = await startFogline();
    browser = await openBrowser();
    ({ page, close } = await openPage(browser, fogline, { size }));
    await signIn(page, THEORIST);
  });
  afterAll(async () => {
    await close?.();
    await browser?.close();
    await fogline?.stop();
  });

  /** Nothing is wider than the window, at any step. */
  async function fits(name: string): Promise<void> {
    await screenshot(page, `builder-${size}-${name}`);
    const over = await page.evaluate(() => document.documentElement.scrollWidth - innerWidth);
    expect([name, over]).toEqual([name, 0]);
  }

  it("goes from a filter to a complete table with five decisions, without a horizontal scroll", async () => {
    await visit(page, "/tables", "Tables");
    await link(page, "New table").click();
    await heading(page, "New table").waitFor();
    await entry(page, "Redshift from").fill("5.3");
    await entry(page, "Redshift from").press("Enter");
    await page.waitForURL((url) => url.searchParams.get("z") === "5.3-");
    await fits("1-filter");
    if (phone) await button(page, "See the rows").click();
    await page.getByText(/^\d+ in, \d+ out with a reason$/).waitFor();
    await fits("2-rows");
    if (phone) await button(page, "To the decisions").click();
    const open = page.getByText(/^\d+ open$/);
    await open.waitFor();
    expect(Number.parseInt((await open.textContent()) ?? "0", 10)).toBeGreaterThanOrEqual(5);

    // One by choice, with its reason; the others as proposed.
    const own = page.getByRole("radio", { name: /, with a reason$/ }).first();
    await own.check();
    await entry(page, "Why, in a few words").fill("Our model was trained on it.");
    await fits("3-decisions");
    // It counts a moment after the last word; a kept row may bring questions of its own.
    await button(page, /^Show \d+ taken$/).waitFor();
    await takeProposals(page);
    await fits("4-taken");
    if (phone) await button(page, "To save it").click();
    const name = `Everything above 5.3, ${size}`;
    await entry(page, "Name of the table").fill(name);
    await fits("5-save");
    await button(page, "Save the table").click();
    await heading(page, name).waitFor();
    await fits("6-table");

    const path = new URL(page.url()).pathname.replace("/tables/", "/api/tables/");
    const response = await fetch(`${fogline.url}${path}.csv`);
    expect(response.status).toBe(200);
    const text = await response.text();
    expect(text).toContain("(person): Our model was trained on it.");
    const { data } = Papa.parse(text, { header: true, comments: "#", skipEmptyLines: true });
    expect(data.length).toBeGreaterThanOrEqual(10);
  });

  it("keeps what was chosen over a reload", async () => {
    await visit(page, "/tables/new?step=save", "New table");
    await entry(page, "Name of the table").fill("Not saved yet");
    await page.reload();
    expect(await entry(page, "Name of the table").inputValue()).toBe("Not saved yet");
  });
});
