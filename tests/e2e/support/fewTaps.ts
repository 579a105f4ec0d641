import type { Locator, Page } from "playwright-core";

import { button, entry, heading, link } from "./steps";

// Invented, with a DOI under the prefix reserved for examples.
const BIBTEX = `@article{orrel27,
  author = {Orrel, Mina and Sandvei, Tor},
  title = {One spectrum beyond the Grayfen veil},
  journal = {Journal of Distant Weather},
  year = 2027, volume = 45, pages = {12--30},
  doi = {10.5555/jdw.2027.0012}
}`;

/**
 * Enters a two-sided value from a pasted citation, from the desk to the submission, and counts
 * everything a thumb does: each touch, each field filled, each word chosen from a list.
 *
 * @param page - Signed in as a contributor, at the size of a phone.
 * @returns What was done, in order; its length is the count.
 */
export async function enterFromCitation(page: Page): Promise<string[]> {
  const done: string[] = [];
  const tap = async (locator: Locator, name: string) => {
    done.push(`tap ${name}`);
    await locator.click();
  };
  const fill = async (label: string, text: string) => {
    done.push(`fill ${label}`);
    await entry(page, label).fill(text);
  };
  /** A word already chosen by the form costs nothing. */
  const choose = async (label: string, value: string) => {
    const select = entry(page, label);
    if ((await select.inputValue()) === value) return;
    done.push(`choose ${label}`);
    await select.selectOption(value);
  };
  const segment = async (group: string, word: string) => {
    const radios = page.getByRole("radiogroup", { name: group, exact: true });
    const radio = radios.getByRole("radio", { name: word, exact: true });
    if (await radio.isChecked()) return;
    done.push(`tap ${word}`);
    await radios.getByText(word, { exact: true }).click();
  };

  await page.goto("/desk");
  await heading(page, "Desk").waitFor();
  await tap(link(page, "New constraint").first(), "New constraint");
  await heading(page, "The paper").waitFor();
  await fill("BibTeX", BIBTEX);
  await tap(button(page, /^Use /), "Use this paper");
  await heading(page, "What the paper prints").waitFor();
  await choose("Quantity", "neutralFraction");
  await segment("Fraction as printed", "Neutral");
  await segment("Statement", "value");
  await fill("Value", "0.61");
  await fill("+ plus", "0.14");
  await fill("− minus", "0.12");
  await choose("Level", "oneSigma");
  await choose("Estimator", "median");
  await fill("Redshift", "7.43");
  await choose("Role of the redshift", "point");
  await choose("Weighting", "volume");
  await choose("Scale", "linear");
  await fill("Exact printed text", "x = 0.61 +0.14 -0.12 (1 sigma, median) at z = 7.43");
  await tap(button(page, "Method and data"), "Method and data");
  await heading(page, "Where it comes from").waitFor();
  await tap(button(page, "Choose the methods"), "Choose the methods");
  const sheet = page.getByRole("dialog");
  await tap(
    sheet.getByRole("checkbox", { name: "Quasar damping wing", exact: true }),
    "the method",
  );
  await tap(button(sheet, "Done"), "Done");
  await fill("Sightlines, fields and samples", "Grayfen quasar 3");
  done.push("enter");
  await entry(page, "Sightlines, fields and samples").press("Enter");
  await button(page, "Remove Grayfen quasar 3").waitFor();
  await fill("Table, row or section", "Table 1, row 2");
  await choose("Version read", "published");
  await tap(button(page, "Check"), "Check");
  await heading(page, "Check and submit").waitFor();
  await page.getByText("Comparing with the records of the registry").waitFor({ state: "detached" });
  const answers = entry(page, "Your answer");
  for (let at = 0; at < (await answers.count()); at += 1) {
    done.push("fill an answer");
    await answers.nth(at).fill("It stands so in the paper.");
  }
  await tap(page.getByRole("checkbox", { name: /data licence/ }), "the licence");
  await tap(button(page, "Submit for review"), "Submit for review");
  await page.getByText(/^FL-\d+ is submitted$/).waitFor();
  return done;
}
