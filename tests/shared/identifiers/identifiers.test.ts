import { arxivVersion, findArxiv, normalizeArxiv } from "~shared/identifiers/arxiv";
import { normalizeBibcode } from "~shared/identifiers/bibcode";
import { normalizeDoi } from "~shared/identifiers/doi";
import { normalizeOrcid } from "~shared/identifiers/orcid";
import {
  formatQuotable,
  formatRecordNumber,
  parseQuotable,
  parseRecordNumber,
} from "~shared/identifiers/recordNumber";

describe("record numbers", () => {
  it("are padded to four digits and grow beyond", () => {
    expect([formatRecordNumber(42), formatRecordNumber(12345), formatQuotable(42, 3)]).toEqual([
      "FL-0042",
      "FL-12345",
      "FL-0042.3",
    ]);
  });

  it.each([
    ["FL-0042", 42],
    ["fl-42", 42],
    ["FL0042", 42],
    [" FL-0042.3 ", 42],
    ["42", null],
    ["FL-0", null],
    ["FL-00x", null],
  ])("%p is read as %p", (text, number) => {
    expect(parseRecordNumber(text)).toBe(number);
  });

  it.each([
    ["FL-0042.3", { number: 42, ordinal: 3 }],
    [" fl42.03 ", { number: 42, ordinal: 3 }],
    ["FL-0042", null],
    ["FL-0042.0", null],
    ["42.3", null],
    ["", null],
  ])("%p with its revision is read as %p", (text, quotable) => {
    expect(parseQuotable(text)).toEqual(quotable);
  });

  it.each([0, -1, 1.5, NaN])("there is no record %p", (number) => {
    expect(() => formatRecordNumber(number)).toThrow("number must be a whole number from 1");
  });
});

it.each([
  ["10.5555/MNRAS.2029.1402", "10.5555/mnras.2029.1402"],
  ["https://doi.org/10.5555/abc", "10.5555/abc"],
  ["http://dx.doi.org/10.5555/abc", "10.5555/abc"],
  ["doi: 10.5555/abc.", "10.5555/abc"],
  ["10.5555/a%2Fb", "10.5555/a/b"],
  ["10.5555/a\\_b", "10.5555/a_b"],
  ["abc", null],
  ["10.5/abc", null],
  ["", null],
])("the DOI in %p is %p", (text, doi) => {
  expect(normalizeDoi(text)).toBe(doi);
});

it.each([
  ["arXiv:3306.09999v2", "3306.09999", 2],
  ["3101.01234", "3101.01234", null],
  ["https://arxiv.org/abs/3101.01234v11", "3101.01234", 11],
  ["arxiv.org/pdf/3101.01234v1.pdf", "3101.01234", 1],
  ["arXiv:3101.01234 [astro-ph.CO]", "3101.01234", null],
  ["astro-ph/9901234v3", "astro-ph/9901234", 3],
  ["math.GT/9901234", "math/9901234", null],
  ["10.5555/abc", null, null],
  ["2034", null, null],
])("the arXiv number in %p is %p, version %p", (text, number, version) => {
  expect(normalizeArxiv(text)).toBe(number);
  expect(arxivVersion(text)).toBe(version);
});

it("finds an arXiv number inside a note", () => {
  expect(findArxiv("arXiv:3309.54321, submitted")).toBe("3309.54321");
  expect(findArxiv("see https://arxiv.org/abs/3309.54321v2")).toBe("3309.54321");
  expect(findArxiv("volume 3309.54321")).toBeNull();
});

it.each([
  ["2031ApJ..1201...77A", "2031ApJ..1201...77A"],
  ["https://example.org/abs/2031ApJ..1201...77A/abstract", "2031ApJ..1201...77A"],
  ["2033A%26A...812A..41C", "2033A&A...812A..41C"],
  ["2031ApJ", null],
  ["%", null],
])("the bibcode in %p is %p", (text, bibcode) => {
  expect(normalizeBibcode(text)).toBe(bibcode);
});

describe("ORCID", () => {
  // 0000-0002-1825-0097 is the invented person of ORCID's own documentation. For the others ISO 7064 MOD 11-2
  // by hand: after zeros and a last digit d the check is (12 − 2d mod 11) mod 11, so 8 for d = 2 and ten for d = 1.
  it("takes a sound one in any spelling", () => {
    expect(normalizeOrcid("https://orcid.org/0000-0002-1825-0097")).toBe("0000-0002-1825-0097");
    expect(normalizeOrcid("0000000000000028")).toBe("0000-0000-0000-0028");
    expect(normalizeOrcid("0000-0000-0000-001x")).toBe("0000-0000-0000-001X");
  });

  it("refuses one with a slipped digit, or none at all", () => {
    expect(normalizeOrcid("0000-0002-1825-0098")).toBeNull();
    expect(normalizeOrcid("0000-0002-1825")).toBeNull();
  });
});
