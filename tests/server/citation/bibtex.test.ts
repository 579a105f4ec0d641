import { readFileSync } from "node:fs";
import { join } from "node:path";

import fc from "fast-check";

import {
  entryWithKey,
  isProblem,
  parseBibtex,
  type EntryProblem,
  type ParsedEntry,
} from "~server/citation/bibtex";
import { authorList } from "~server/citation/names";

const sample = readFileSync(join(__dirname, "../../fixtures/samples/group-list.bib"), "utf8");

function one(text: string): ParsedEntry {
  const results = parseBibtex(text);
  expect(results).toHaveLength(1);
  const [first] = results;
  if (!first || isProblem(first)) throw new Error(JSON.stringify(first));
  return first;
}

function article(fields: string): ParsedEntry {
  return one(`@article{k, title = {T}, author = {Arvensis, L.}, year = 2031, ${fields}}`);
}

function authorsOf(field: string): string[] {
  const entry = one(`@article{k, title = {T}, year = 2031, author = ${field}}`);
  return authorList(entry.authors, entry.moreAuthors);
}

function titleOf(value: string): string {
  return one(`@article{k, author = {Arvensis, L.}, year = 2031, title = ${value}}`).title;
}

function problem(text: string): EntryProblem {
  const found = parseBibtex(text).filter(isProblem);
  expect(found).toHaveLength(1);
  return found[0]!;
}

describe("a group's hand-kept .bib", () => {
  // tests/fixtures/samples/group-list.bib: twelve invented entries as the usual services hand them out.
  const entries = parseBibtex(sample).map((result) => {
    if (isProblem(result)) throw new Error(result.problem);
    return result;
  });
  const byKey = (key: string) => entries.find((entry) => entry.givenKey === key)!;

  it("is read whole, each entry at its line", () => {
    expect(entries.map((entry) => [entry.givenKey, entry.line])).toEqual([
      ["Arvensis2031", 1],
      ["Brodowska2029", 19],
      ["CoralFields2033", 24],
      ["Dresnok2030", 29],
      ["Eisvogel2034", 30],
      ["Fjellheim2028", 35],
      ["Gannet2032", 36],
      ["Halcyon2035", 37],
      ["Isbrand2033", 38],
      ["Jorvik2031", 39],
      ["Kittiwake2030", 40],
      ["Lorikeet2029", 41],
    ]);
  });

  it("shows accents, maths, macros and identifiers as they will be cited", () => {
    expect(byKey("Arvensis2031")).toMatchObject({
      title: "Damping wings in the spectra of two z>7 quasars: the neutral fraction of the IGM",
      year: 2031,
      container: "ApJ",
      volume: "1201",
      pages: "77",
      doi: "10.5555/apj.2031.0077",
      arxiv: "3101.01234",
      bibcode: "2031ApJ..1201...77A",
      shortName: "Arvensis et al. 2031",
    });
    expect(authorList(byKey("Arvensis2031").authors, false)).toEqual([
      "Arvensis, L.",
      "Müllerova, P.",
      "de Groot-Larsen, A. B.",
      "Šedivý, J.",
    ]);
    expect(byKey("Arvensis2031").csl.issued).toEqual({ "date-parts": [[2031, 3]] });
    expect(byKey("CoralFields2033")).toMatchObject({
      title: "Lyα emitters at z=6.6 and z=7.0 over 24 deg²",
      container: "A&A",
      pages: "A41",
      arxiv: "3306.09999",
      arxivVersion: 2,
      moreAuthors: true,
      shortName: "Coral Fields Collaboration et al. 2033",
    });
    expect(byKey("CoralFields2033").csl.issued).toEqual({ "date-parts": [[2033, 11]] });
    expect(byKey("Brodowska2029").doi).toBe("10.5555/mnras.2029.1402");
    expect(byKey("Fjellheim2028").shortName).toBe("Fjellheim & Ås 2028");
    expect(byKey("Gannet2032")).toMatchObject({
      entryType: "phdthesis",
      container: "University of Nowhere",
    });
    expect(byKey("Halcyon2035")).toMatchObject({
      shortName: "Halcyon Team 2035",
      container: "Phys. Rev. D",
      title: "Halcyon results. III. Cosmological parameters",
    });
    expect(byKey("Isbrand2033")).toMatchObject({ arxiv: "3309.54321", container: null });
    expect(byKey("Eisvogel2034").shortName).toBe("Eisvogel et al. 2034");
  });

  it("stays as it came under another key", () => {
    for (const entry of entries) {
      const renamed = entryWithKey(entry.raw, "New2099");
      expect(renamed).toBe(entry.raw.source.replace(entry.givenKey, "New2099"));
    }
  });
});

describe("authors", () => {
  it.each([
    ["{{\\AA}s, K.}", ["Ås, K."]],
    ["{Fjellheim, \\O.}", ["Fjellheim, Ø."]],
    ['"{\\O}stby, K."', ["Østby, K."]],
    ["{{\\'\\i}gor, B.}", ["ígor, B."]],
    ["{Mart{\\'\\i}nek, B.}", ["Martínek, B."]],
    ["{Mart\\'{\\i}nek, B.}", ["Martínek, B."]],
    ["{Mart\\'{i}nek, B.}", ["Martínek, B."]],
    ['{M{\\" u}ller, B.}', ["Müller, B."]],
    ["{Ha{\\v c}ek, J.}", ["Haček, J."]],
    ["{{\\L}ukasz, B. and Gro{\\ss}, C.}", ["Łukasz, B.", "Groß, C."]],
    ["{{Arvensis}, L. and {de Groot-Larsen}, A.~B.}", ["Arvensis, L.", "de Groot-Larsen, A. B."]],
    ["{{Arvensis, L.} and {Vale, T. U.}}", ["Arvensis, L.", "Vale, T. U."]],
    ["{{Coral Fields Collaboration}}", ["Coral Fields Collaboration"]],
    ["{{Dust and Gas Team} and Tamm, R.}", ["Dust and Gas Team", "Tamm, R."]],
    ["{Tamm, R. and others}", ["Tamm, R.", "and others"]],
    ["{Tamm, R. and et al.}", ["Tamm, R.", "and others"]],
    ["{Ruth Gannet and Jan van der Zee}", ["Gannet, Ruth", "van der Zee, Jan"]],
    ["{Tamm, Jr., R.}", ["Tamm, Jr., R."]],
    ["{Tamm, R.\n    AND\n  Vale, T.}", ["Tamm, R.", "Vale, T."]],
    ["{岡本, 太}", ["岡本, 太"]],
  ])("%s", (field, expected) => {
    expect(authorsOf(field)).toEqual(expected);
  });

  it("an editor stands in when there is no author", () => {
    const entry = one("@proceedings{k, editor = {Tamm, R.}, title = {T}, year = 2031}");
    expect(entry.shortName).toBe("Tamm 2031");
  });
});

describe("titles", () => {
  it.each([
    ['"{Damping wings of {$z>7$} quasars}"', "Damping wings of z>7 quasars"],
    ["{Ly$\\alpha$ at $z\\simeq7.5$}", "Lyα at z≃7.5"],
    ["{{\\ensuremath{z\\sim7}} and $\\lesssim 3$}", "z∼7 and ≲3"],
    ["{Over 24\\,deg$^2$ of sky}", "Over 24 deg² of sky"],
    ["{Costs \\& gains: 50\\% of $5}", "Costs & gains: 50% of $5"],
    ["{H~{\\sc i} and {\\rm H\\,II}}", "H i and H II"],
    ["{Tom's ``quoted'' word -- here}", "Tom's “quoted” word – here"],
    ["{Part } # {one}", "Part one"],
    ["{An unknown \\foo{bar} \\begin{x} end}", "An unknown bar x end"],
  ])("%s", (value, expected) => {
    expect(titleOf(value)).toBe(expected);
  });
});

describe("journals", () => {
  it.each([
    ["{\\apj}", "ApJ"],
    ["{{\\apj}}", "ApJ"],
    ["\\mnras", "MNRAS"],
    ["apj", "ApJ"],
    ["{\\apjl}", "ApJL"],
    ["{\\aap}", "A&A"],
    ["{\\prd}", "Phys. Rev. D"],
    ["{\\aj}", "AJ"],
    ["{\\pasj}", "PASJ"],
    ["{\\jcap}", "JCAP"],
    ["{\\nat}", "Nature"],
    ["{Astronomy \\& Astrophysics}", "Astronomy & Astrophysics"],
    ['"Invented Journal of Astrophysics"', "Invented Journal of Astrophysics"],
    ['{Zeitschrift f{\\"u}r Nebel}', "Zeitschrift für Nebel"],
  ])("%s", (value, expected) => {
    expect(article(`journal = ${value}`).container).toBe(expected);
  });

  it("the file's own @string words are written out, in the stored text too", () => {
    const entry = one(
      '@string{ija = "Invented Journal"}\n@article{k, title={T}, author={A, B.}, year=2031, journal = ija # {, Letters}}',
    );
    expect(entry.container).toBe("Invented Journal, Letters");
    expect(entryWithKey(entry.raw, "New1")).toContain("journal = {Invented Journal} # {, Letters}");
  });

  it("a bare macro gets its braces in the stored text, a month keeps its word", () => {
    const entry = article("journal = \\mnras, month = mar");
    expect(entryWithKey(entry.raw, "New1")).toContain("journal = {\\mnras}, month = mar}");
    expect(entry.raw.source).toContain("journal = \\mnras,");
  });
});

describe("identifiers", () => {
  it.each([
    ["doi = {10.5555/ABC.1}", "10.5555/abc.1"],
    ["doi = {https://doi.org/10.5555/Abc}", "10.5555/abc"],
    ["doi = {doi:10.5555/abc}", "10.5555/abc"],
    ["doi = {10.5555/a{\\_}b}", "10.5555/a_b"],
    ["url = {https://dx.doi.org/10.5555/abc}", "10.5555/abc"],
    ["note = {Published, doi:10.5555/abc.}", "10.5555/abc"],
    ["doi = {none}", null],
  ])("DOI from %s", (field, expected) => {
    expect(article(field).doi).toBe(expected);
  });

  it.each([
    ["eprint = {3101.01234}, archivePrefix = {arXiv}", "3101.01234", null],
    ["eprint = {arXiv:3101.01234v3}", "3101.01234", 3],
    ["eprint = {astro-ph/0601001}, archiveprefix = {arXiv}", "astro-ph/0601001", null],
    ["eprint = {0601001}, primaryClass = {astro-ph}", "astro-ph/0601001", null],
    ["eprint = {3101.01234}, archivePrefix = {hal}", null, null],
    ["note = {arXiv:3309.54321, submitted}", "3309.54321", null],
    ["note = {submitted, arXiv 3309.54321v2}", "3309.54321", 2],
    ["journal = {arXiv e-prints}, eid = {arXiv:3101.01234}", "3101.01234", null],
    ["journal = {arXiv preprint arXiv:3101.01234}", "3101.01234", null],
    ["url = {https://arxiv.org/abs/3101.01234v1}", "3101.01234", 1],
    ["note = {Table 3101.01234 of nothing}", null, null],
  ])("arXiv number from %s", (fields, number, version) => {
    const entry = article(fields);
    expect([entry.arxiv, entry.arxivVersion]).toEqual([number, version]);
  });

  it("bibcode from the abstract's address, also when it is escaped", () => {
    expect(article("adsurl = {https://example.org/abs/2031A%26A...812A..41C}").bibcode).toBe(
      "2031A&A...812A..41C",
    );
  });

  it("bibcode from the key", () => {
    const entry = one("@article{2031ApJ..1201...77A, title = {T}, author = {A, B.}, year = 2031}");
    expect(entry.bibcode).toBe("2031ApJ..1201...77A");
  });
});

describe("broken BibTeX", () => {
  const good = (key: string) =>
    `@article{${key},\n  title = {Good},\n  author = {A, B.},\n  year = 2031\n}\n`;

  it.each([
    [
      "a brace never closed",
      "@article{bad,\n  title = {Open,\n  year = 2031\n}\n",
      2,
      "never closed",
    ],
    ["a quote never closed", '@article{bad,\n  title = "Open,\n  year = 2031\n}\n', 2, "quotation"],
    [
      "an entry never closed",
      "@article{bad,\n  title = {Open},\n  year = 2031\n\n",
      4,
      "last brace",
    ],
    ["a comma missing", "@article{bad,\n  title = {A}\n  year = 2031\n}\n", 3, "comma is missing"],
    ["an equals sign missing", "@article{bad,\n  title {A},\n year = 2031\n}\n", 2, "no ="],
    ["a value missing", "@article{bad,\n  title = ,\n year = 2031\n}\n", 2, "is missing"],
    ["no comma after the key", "@article{bad\n  title = {A}\n}\n", 1, "no comma after the key"],
    ["no title", "@article{bad, year = 2031}\n", 1, "no title"],
    ["no fields", "@article{bad}\n", 1, "no fields"],
    ["no opening brace", "@article bad, title = {A}\n", 1, "opening brace is missing"],
    ["the wrong end", "@article(bad, title = {A}}\n", 1, "ends with"],
  ])("%s: line and reason, and the others stay", (_what, bad, line, reason) => {
    const results = parseBibtex(good("first") + bad + good("second") + good("third"));
    const problems = results.filter(isProblem);
    expect(problems).toHaveLength(1);
    expect(problems[0]!.line).toBe(5 + line);
    expect(problems[0]!.problem).toContain(reason);
    const readable = results.flatMap((result) => (isProblem(result) ? [] : [result.givenKey]));
    expect(readable).toEqual(["first", "second", "third"]);
  });

  it("names the entry that is broken", () => {
    expect(problem("@article{bad,\n  title = {Open,\n  year = 2031\n}\n").givenKey).toBe("bad");
  });

  it("says when there is nothing to read", () => {
    expect(problem("").problem).toContain("No BibTeX entry was found");
    expect(problem("key,z,value\nx,7,0.3\n").problem).toContain("No BibTeX entry was found");
    expect(problem("mail me at someone@example.org").problem).toContain("No BibTeX entry");
  });

  it("comments and preambles are passed over", () => {
    const text =
      '@comment{ @article{old, title={Old}, year=2000} }\n@preamble{ "\\newcommand{\\x}{y}" }\n% a word @ large\n' +
      good("first");
    expect(one(text).givenKey).toBe("first");
  });

  it("fields after an early closing brace are remarked on", () => {
    const entry = one("@article{k, title = {A}}, year = 2031}\n");
    expect(entry.remarks.join(" ")).toContain("ignored");
  });
});

describe("limits", () => {
  it("200 kB of blanks in a name are refused before the parser sees them", () => {
    // citation-js needs seconds for them: its lexer is quadratic in white space.
    const blanks = " ".repeat(200_000);
    expect(problem(`@article{k, title = {T}, author = {A,${blanks}B.}}`).problem).toContain(
      "longer than 60000 characters",
    );
  });

  it("more than 500 entries: 500 are read, and the rest is named", () => {
    const many = Array.from({ length: 502 }, (_, i) => `@misc{k${i}, title = {T${i}}}\n`).join("");
    const results = parseBibtex(many);
    expect(results).toHaveLength(501);
    expect(results[500]).toMatchObject({
      line: 501,
      problem: expect.stringContaining("500 entries"),
    });
  });

  it("more than 1 MB is refused as a whole", () => {
    expect(problem("@misc{k, title = {T}}".padEnd(1_000_001)).problem).toContain("1 MB");
  });

  it("a title longer than 2000 characters is refused", () => {
    expect(problem(`@misc{k, title = {${"long ".repeat(401)}}}`).problem).toContain("title");
  });

  it("a name longer than 500 characters is refused, guessing why", () => {
    const found = problem(`@misc{k,\n title = {T},\n author = {${"Tamm R. ".repeat(100)}}}`);
    expect(found).toMatchObject({ line: 3, problem: expect.stringContaining("“and” missing") });
  });

  it("definitions that grow by definitions are stopped", () => {
    const letters = "abcdefghijklmnopqrst".split("");
    const grow = letters
      .slice(1)
      .map((letter, i) => `@string{${letter} = ${Array(8).fill(letters[i]).join(" # ")}}\n`);
    const results = parseBibtex(`@string{a = {0123456789}}\n${grow.join("")}@misc{k, title = {T}}`);
    expect(
      results.some((result) => isProblem(result) && /too much|longer/.test(result.problem)),
    ).toBe(true);
    expect(results.at(-1)).toMatchObject({ title: "T" });
    const wide = `@string{w = {${"x".repeat(50_000)}}}\n`;
    const fields = Array.from({ length: 100 }, (_, i) => `f${i}x = w`).join(", ");
    expect(problem(`${wide}@misc{k, title = {T}, ${fields}}`).problem).toContain("too much text");
  });

  // Each of these takes minutes or more where a step looks at the whole text again and again.
  it.each([
    ["blanks where a key is expected", `@misc{${" ".repeat(900_000)}`],
    ["blanks before many signs", `${" ".repeat(500_000)}${"@a ".repeat(160_000)}`],
    ["comments that are never closed", "@comment{".repeat(110_000)],
    ["strings that are never closed", '@string{a="'.repeat(90_000)],
    ["entries that are never closed", "\n@misc{a, b={".repeat(70_000)],
    ["a value that is all blanks", `@misc{k, title = {T}, note =${" ".repeat(900_000)}}`],
    ["brackets in a number", `@misc{k, title = {T}, eprint = {${"[".repeat(59_000)}}}`],
    ["names without end", `@misc{k, title = {T}, author = {${"A ".repeat(29_000)}}}`],
    ["commas without end", `@misc{k, title = {T}, author = {${"A,".repeat(29_000)}}}`],
    ["accents without end", `@misc{k, title = {T}, author = {${"\\'{e}".repeat(9_000)}}}`],
    ["maths without end", `@misc{k, title = {T}, note = {${"$a$".repeat(19_000)}}}`],
    ["angles without end", `@misc{k, title = {T}, note = {${"<i ".repeat(19_000)}}}`],
  ])("%s", (_what, text) => {
    expect(parseBibtex(text).length).toBeGreaterThan(0);
  });

  it("deep braces are refused", () => {
    expect(problem(`@misc{k, title = {${"{".repeat(10_000)}}`).problem).toContain("nested");
  });

  it("control characters are refused with their line", () => {
    expect(problem("@misc{k,\n title = {T\u0000}}")).toMatchObject({
      line: 2,
      problem: expect.stringContaining("control characters"),
    });
  });
});

describe("any text at all", () => {
  const piece = fc.constantFrom(
    "@article{",
    "@string{",
    "@comment{",
    "@preamble{",
    "@",
    "{",
    "}",
    "(",
    ")",
    '"',
    ",",
    "=",
    "#",
    "key",
    "title",
    "author",
    "year",
    "2031",
    "$",
    "\\",
    "\\'",
    "\\i",
    "\\begin{a}",
    "\\apj",
    " and ",
    "and others",
    "\n",
    " ",
    "~",
    "%",
    "é",
    "ı\u0301",
    "doi",
    "eprint",
    "<i>",
    "\u2028",
    "__proto__",
  );
  const text = fc.oneof(
    fc.array(piece, { maxLength: 60 }).map((parts) => parts.join("")),
    fc.string({ unit: "binary", maxLength: 200 }),
  );

  it("gives results and never throws", () => {
    fc.assert(
      fc.property(text, (garbage) => {
        const results = parseBibtex(garbage);
        expect(results.length).toBeGreaterThan(0);
        for (const result of results) {
          expect(result.line).toBeGreaterThanOrEqual(1);
          expect(result.line).toBeLessThanOrEqual(garbage.split(/\r\n?|\n/).length);
          if (isProblem(result)) expect(result.problem).not.toBe("");
          else expect(result.title).not.toBe("");
        }
      }),
      { seed: 20261201, numRuns: 2000 },
    );
  });

  it("inside one value, the next entry is still read", () => {
    const inside = fc
      .array(piece, { maxLength: 30 })
      .map((parts) => parts.join(""))
      .filter((value) => !/@(comment|string|preamble)/.test(value));
    fc.assert(
      fc.property(inside, (value) => {
        const results = parseBibtex(
          `@article{one, title = {${value}}, year = 2031}\n@misc{two, title = {Second}}\n`,
        );
        const keys = results.flatMap((result) => (isProblem(result) ? [] : [result.givenKey]));
        expect(keys).toContain("two");
      }),
      { seed: 20261201, numRuns: 1000 },
    );
  });

  it("what is read is read the same from the stored text", () => {
    fc.assert(
      fc.property(text, (garbage) => {
        for (const result of parseBibtex(garbage)) {
          if (isProblem(result)) continue;
          const again = parseBibtex(entryWithKey(result.raw, "Key2031"));
          expect(again).toHaveLength(1);
          const [first] = again;
          if (!first || isProblem(first)) throw new Error(JSON.stringify([result.raw, first]));
          expect(first.title).toBe(result.title);
          expect(first.authors).toEqual(result.authors);
        }
      }),
      { seed: 20261201, numRuns: 1000 },
    );
  });
});
