import "@citation-js/plugin-bibtex";

import { Cite } from "@citation-js/core";

import {
  releaseBibtex,
  releaseCff,
  releaseCsl,
  releaseKey,
  type CitedRelease,
} from "~shared/formats/releaseCitation";

const RELEASE: CitedRelease = {
  registry: "Fogline",
  number: 3,
  date: "2026-12-01",
  address: "https://fogline.example/releases/3?a_b=1",
  digest: "ab".repeat(32),
  licence: "CC BY 4.0",
  demonstration: false,
};
const TITLE =
  "Fogline: published constraints on the neutral-fraction history of the intergalactic medium, release 3";

it("the key holds letters and digits only, so that BibTeX takes it", () => {
  expect(releaseKey(RELEASE)).toBe("FoglineRelease3");
  expect(releaseKey({ ...RELEASE, registry: "Our {own}, fog-line" })).toBe("OurownfoglineRelease3");
});

describe("BibTeX", () => {
  it("is one entry, read by another program as it was meant", () => {
    const [entry] = new Cite(releaseBibtex(RELEASE), { forceType: "@bibtex/text" }).data;
    expect(entry).toMatchObject({
      id: "FoglineRelease3",
      title: TITLE,
      issued: { "date-parts": [[2026, 12]] },
    });
  });

  it("keeps the registry's name whole, the address in \\url and the digest in the note", () => {
    const text = releaseBibtex(RELEASE);
    expect(text).toContain("author = {{Fogline registry}}");
    expect(text).toContain("howpublished = {\\url{https://fogline.example/releases/3?a_b=1}}");
    expect(text).toContain(`note = {SHA-256 ${"ab".repeat(32)}}`);
    expect(text.endsWith("}\n")).toBe(true);
  });

  // BibTeX's own abbreviations of the months; common practice.
  it.each([
    ["2026-01-31", "jan"],
    ["2026-05-04", "may"],
    ["2026-09-30", "sep"],
    ["2026-12-01", "dec"],
  ])("names the month of %s %s", (date, month) => {
    expect(releaseBibtex({ ...RELEASE, date })).toContain(`month = ${month},`);
  });
});

it("CSL-JSON is one data set with its day", () => {
  const text = releaseCsl(RELEASE);
  expect(text.endsWith("]\n")).toBe(true);
  expect(JSON.parse(text)).toEqual([
    {
      id: "FoglineRelease3",
      type: "dataset",
      title: TITLE,
      author: [{ literal: "Fogline registry" }],
      issued: { "date-parts": [[2026, 12, 1]] },
      version: "3",
      URL: RELEASE.address,
      note: `SHA-256 ${RELEASE.digest}`,
    },
  ]);
});

describe("CITATION.cff", () => {
  /** Values of the lines at the top level. */
  const values = (text: string) =>
    Object.fromEntries(
      text
        .split("\n")
        .map((line) => /^([a-z-]+): (.+)$/.exec(line))
        .filter((match) => match !== null)
        .map(([, name, value]) => [name, value]),
    ) as Record<string, string>;

  it("has the members that version 1.2.0 of the format requires, and what is cited", () => {
    // Required: cff-version, message, title, authors. From memory of the format's guide.
    const text = releaseCff(RELEASE);
    expect(values(text)).toMatchObject({
      "cff-version": "1.2.0",
      type: "dataset",
      title: JSON.stringify(TITLE),
      version: '"3"',
      "date-released": "2026-12-01",
      url: JSON.stringify(RELEASE.address),
    });
    expect(values(text).message).toMatch(/^"Cite this release, and the original papers/);
    expect(text).toContain('authors:\n  - name: "Fogline registry"\n');
    expect(text).toContain(`    value: "sha256:${RELEASE.digest}"\n`);
  });

  it("names the licence by its SPDX identifier", () => {
    expect(values(releaseCff(RELEASE)).license).toBe('"CC-BY-4.0"');
    expect(values(releaseCff({ ...RELEASE, licence: " CC0  1.0 " })).license).toBe('"CC0-1.0"');
  });

  it("keeps a name with quotes and colons one text", () => {
    const registry = 'The "fog": line\nauthors: none';
    const text = releaseCff({ ...RELEASE, registry });
    expect(JSON.parse(values(text).title!)).toContain(registry);
    expect(text.match(/^authors:/gm)).toHaveLength(1);
  });
});

it("every form says when the records are invented", () => {
  const release = { ...RELEASE, demonstration: true };
  for (const write of [releaseBibtex, releaseCsl, releaseCff]) {
    expect(write(release)).toContain("(invented demonstration)");
    expect(write(RELEASE)).not.toContain("invented");
  }
});
