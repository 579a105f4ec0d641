import type { Browser } from "playwright-core";

import {
  SCHEMES,
  SIZE_NAMES,
  axeViolations,
  layoutProblems,
  openBrowser,
  openPage,
  screenshot,
  signIn,
  type WatchedPage,
} from "./support/browser";
import { startFogline, type Fogline } from "./support/fogline";

/** Every kind of screen, by who sees it. */
const SCREENS: Record<string, readonly string[]> = {
  nobody: [
    ...["/", "/constraints", "/constraints/FL-0001", "/tables"],
    ...["/account/sign-in", "/account/register", "/account/reset", "/no-such-page"],
  ],
  contributor: ["/desk", "/desk/import", "/account", "/tables/new"],
  editor: ["/desk"],
  maintainer: ["/desk", "/desk/people", "/desk/mail"],
};

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

describe.each(SIZE_NAMES)("on a %s screen", (size) => {
  describe.each(SCHEMES)("in the %s theme", (scheme) => {
    describe.each(Object.keys(SCREENS))("as %s", (who) => {
      let opened: WatchedPage;

      beforeAll(async () => {
        opened = await openPage(browser, fogline, { size, scheme });
        if (who !== "nobody") await signIn(opened.page, `${who}@fogline.example`);
      });

      afterAll(() => opened?.close());

      it.each(SCREENS[who] ?? [])(
        "%s has no serious finding of axe, nothing cut and nothing beyond the window",
        async (address) => {
          const { page } = opened;
          await page.goto(address);
          await page.getByRole("heading", { level: 1 }).first().waitFor();
          await page.waitForLoadState("networkidle");
          const name = address.replaceAll("/", "-").slice(1) || "history";
          await screenshot(page, `${who}-${name}-${size}-${scheme}`);
          expect({
            axe: await axeViolations(page),
            layout: await layoutProblems(page),
          }).toEqual({ axe: [], layout: [] });
        },
      );
    });
  });
});
