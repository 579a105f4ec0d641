import type { Browser } from "playwright-core";

import { openBrowser, openPage, signIn } from "./support/browser";
import { enterFromCitation } from "./support/fewTaps";
import { startFogline, type Fogline } from "./support/fogline";

describe("a two-sided value from a pasted citation, on a phone", () => {
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

  it("is entered and submitted with fewer than 30 taps and fields", async () => {
    const { page, problems, close } = await openPage(browser, fogline, { size: "phone" });
    await signIn(page, "contributor@fogline.example");
    const done = await enterFromCitation(page);
    // The count belongs in the note of each release: it is printed, not only held below 30.
    process.stdout.write(`taps and fields: ${done.length} (${done.join("; ")})\n`);
    expect(done.length).toBeLessThan(30);
    expect(problems).toEqual([]);
    await close();
  });
});
