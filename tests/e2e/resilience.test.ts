import type { Browser, Page, Route } from "playwright-core";

import { SIZE_NAMES, openBrowser, openPage, signIn, type WatchedPage } from "./support/browser";
import { startFogline, type Fogline } from "./support/fogline";
import { ask, emptyDraft } from "./support/people";
import { button, entry, heading, link, visit } from "./support/steps";

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

/** Lets every call of the API fail as `answer` says, until it is called back. */
async function breakApi(page: Page, answer: (route: Route) => Promise<void>) {
  await page.route("**/graphql", answer);
  return () => page.unroute("**/graphql", answer);
}

const serverError = (route: Route) =>
  route.fulfill({
    status: 500,
    contentType: "application/json",
    body: JSON.stringify({
      errors: [{ message: "Internal", extensions: { code: "INTERNAL", requestId: "e2e-4711" } }],
    }),
  });

describe.each(SIZE_NAMES)("on a %s screen", (size) => {
  let opened: WatchedPage;
  let page: Page;

  beforeEach(async () => {
    opened = await openPage(browser, fogline, { size });
    page = opened.page;
  });

  afterEach(() => opened.close());

  const shown = (text: string | RegExp) =>
    page
      .getByText(text, { exact: typeof text === "string" })
      .first()
      .waitFor();

  /** What the server holds of a draft. */
  const kept = async (id: string) => {
    const { submission } = await ask<{
      submission: { fields: { value: string | null; printedText: string | null } };
    }>(
      page.context().request,
      "query Kept($id: ID!) { submission(id: $id) { fields { value printedText } } }",
      { id },
    );
    return submission.fields;
  };

  describe("a draft", () => {
    let id: string;

    beforeEach(async () => {
      await signIn(page, "contributor@fogline.example");
      id = await emptyDraft(page.context().request);
      await visit(page, `/desk/submit/${id}?step=printed`, "What the paper prints");
    });

    it("saves itself, and stands there after a reload", async () => {
      await entry(page, "Quantity").selectOption("opticalDepth");
      await entry(page, "Exact printed text").fill("tau = 0.0590 +- 0.0060");
      await shown(/^Saved \d\d:\d\d$/);
      await page.reload();
      await heading(page, "What the paper prints").waitFor();
      expect(await entry(page, "Exact printed text").inputValue()).toBe("tau = 0.0590 +- 0.0060");
      expect((await kept(id)).printedText).toBe("tau = 0.0590 +- 0.0060");
    });

    it("loses nothing to a reload in the same breath", async () => {
      await page.route("**/graphql", (route) => route.abort());
      await entry(page, "Exact printed text").fill("typed just before the reload");
      await page.unroute("**/graphql");
      await page.reload();
      await heading(page, "What the paper prints").waitFor();
      expect(await entry(page, "Exact printed text").inputValue()).toBe(
        "typed just before the reload",
      );
      await shown(/^Saved \d\d:\d\d$/);
      expect((await kept(id)).printedText).toBe("typed just before the reload");
    });

    it("takes what is typed without a connection and sends it when there is one", async () => {
      await page.context().setOffline(true);
      await entry(page, "Exact printed text").fill("typed in a tunnel");
      await shown("No connection; kept here");
      await shown(/is sent when the connection is back\.$/);
      expect((await kept(id)).printedText).toBeNull();
      await page.context().setOffline(false);
      await shown(/^Saved \d\d:\d\d$/);
      expect((await kept(id)).printedText).toBe("typed in a tunnel");
    });

    it("is kept when the server fails, and says so", async () => {
      const mend = await breakApi(page, serverError);
      await entry(page, "Exact printed text").fill("typed while the server failed");
      await shown("No connection; kept here");
      await mend();
      await button(page, "Save now").click();
      await shown(/^Saved \d\d:\d\d$/);
      expect((await kept(id)).printedText).toBe("typed while the server failed");
    });

    it("asks which version holds when another window saved a newer one", async () => {
      const other = await page.context().newPage();
      await other.goto(page.url());
      await entry(other, "Exact printed text").fill("typed in the other window");
      await other.getByText(/^Saved \d\d:\d\d$/).waitFor();
      await entry(page, "Exact printed text").fill("typed in this window");
      await shown(/^A newer version was saved on/);
      await button(page, "Keep mine").click();
      await shown(/^Saved \d\d:\d\d$/);
      expect((await kept(id)).printedText).toBe("typed in this window");
    });
  });

  it("says that the server is not reached, and goes on when it is again", async () => {
    await visit(page, "/", "History");
    await page.locator("[data-point]").first().waitFor();
    await page.context().setOffline(true);
    await link(page, "Constraints").click();
    await heading(page, "Constraints").waitFor();
    await page.getByRole("alert").first().waitFor();
    await shown(/^No connection to the server\./);
    await page.context().setOffline(false);
    await button(page, "Try again").first().click();
    await shown(/^Vessarin/);
    expect(await page.getByText(/^No connection to the server\./).count()).toBe(0);
  });

  it("says that the server failed, with the number that finds it in the log", async () => {
    const mend = await breakApi(page, serverError);
    await visit(page, "/constraints", "Constraints");
    await shown(/tell the maintainers this number: e2e-4711\./);
    await mend();
    await button(page, "Try again").first().click();
    await shown(/^Vessarin/);
  });

  it("names an unknown address, and leads on from it", async () => {
    await visit(page, "/lighthouse/keeper", "Nothing at this address");
    await shown(/There is no page at \/lighthouse\/keeper\./);
    await link(page, "Search the constraints").click();
    await heading(page, "Constraints").waitFor();
  });
});
