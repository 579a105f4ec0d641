import { spawnSync } from "node:child_process";
import { copyFileSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";

import { entryWithKey, isProblem, parseBibtex } from "~server/citation/bibtex";
import { compilableBibtex } from "~server/citation/export";

/*
 * Runs the real BibTeX over what we hand out. It comes with Debian's texlive-binaries; the style is
 * our own (tests/fixtures/bibtex/whole.bst), so nothing else of a TeX distribution is needed.
 * Where CI is set, its absence is a failure and not a skip.
 */
const hasBibtex = spawnSync("bibtex", ["--version"]).status === 0;
const itCompiles = hasBibtex || process.env.CI ? it : it.skip;

const fixtures = join(__dirname, "../../fixtures/bibtex");

function exported(text: string): string {
  const citations = parseBibtex(text).map((result, index) => {
    if (isProblem(result)) throw new Error(`line ${result.line}: ${result.problem}`);
    const key = `Key${String(index).padStart(3, "0")}`;
    return { key, entryBibtex: entryWithKey(result.raw, key) };
  });
  return compilableBibtex(citations, ["Fogline, for someone@example.org"]);
}

/** BibTeX's own log and the bibliography it wrote. */
function compile(bib: string): { status: number | null; log: string; bbl: string } {
  const folder = mkdtempSync(join(tmpdir(), "fogline-bibtex-"));
  try {
    copyFileSync(join(fixtures, "whole.bst"), join(folder, "whole.bst"));
    writeFileSync(join(folder, "list.bib"), bib);
    writeFileSync(
      join(folder, "paper.aux"),
      "\\relax\n\\citation{*}\n\\bibstyle{whole}\n\\bibdata{list}\n",
    );
    const { status, stdout } = spawnSync("bibtex", ["paper"], {
      cwd: folder,
      // Without a TeX distribution nothing says that files may lie in the working folder.
      env: { ...process.env, BIBINPUTS: ".", BSTINPUTS: "." },
      encoding: "utf8",
    });
    if (status === null) throw new Error("bibtex is missing: install Debian's texlive-binaries");
    return { status, log: stdout, bbl: readFileSync(join(folder, "paper.bbl"), "utf8") };
  } finally {
    rmSync(folder, { recursive: true });
  }
}

itCompiles("the sample compiles without an error or a warning, every entry and macro there", () => {
  const sample = readFileSync(join(fixtures, "../samples/group-list.bib"), "utf8");
  const { status, log, bbl } = compile(exported(sample));
  expect(log).not.toMatch(/Warning--|error/i);
  expect(status).toBe(0);
  expect(bbl.match(/\\bibitem\{Key\d+\}/g)).toHaveLength(12);
  for (const [macro, name] of [
    ["apj", "ApJ"],
    ["mnras", "MNRAS"],
    ["aap", "A\\&A"],
    ["prd", "Phys. Rev. D"],
  ]) {
    expect(bbl.replace(/\s+/g, " ")).toContain(`\\providecommand{\\${macro}}{${name}}`);
  }
  expect(bbl).toContain("4 authors, first L. {Arvensis}");
  expect(bbl).toContain("3101.01234");
});

itCompiles(
  "what other services write compiles: own strings, bare macros, no key, parentheses",
  () => {
    const text = `
@string{ija = "Invented Journal"}
@preamble{"\\newcommand{\\noop}[1]{}"}
@article{, title = {No key}, author = {A, B.}, year = 2031, journal = ija # ", Letters", month = mar}
@article{ title = {Key left out}, author = {A, B.}, year = 2031, journal = apj}
@article(with.round, title = "Quoted {"}inner{"} marks", author = "A, B.", journal = \\mnras, year = "2031")
@misc{last, title = {Undefined word}, author = {{\\AA}s, \\O.}, year = 2031, note = submitted,}
`;
    const { status, log, bbl } = compile(exported(text));
    expect(log).not.toMatch(/Warning--|error/i);
    expect(status).toBe(0);
    expect(bbl).toContain("Invented Journal, Letters");
    expect(bbl).toContain("\\mnras");
    expect(bbl).toContain("\\apj");
    expect(bbl).toContain("submitted");
  },
);
