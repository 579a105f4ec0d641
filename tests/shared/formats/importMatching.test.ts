import { readFileSync } from "node:fs";
import { join } from "node:path";

import fc from "fast-check";

import {
  buildRows,
  listWords,
  parseList,
  proposeColumns,
  proposeWords,
  rowIdentity,
} from "~shared/formats/importMatching";
import type { CsvList, KeyedCitation } from "~shared/formats/importMatching";

const samples = join(__dirname, "../../fixtures/samples");
const csv = readFileSync(join(samples, "group-list.csv"), "utf8");
const bib = readFileSync(join(samples, "group-list.bib"), "utf8");

function list(text: string): CsvList {
  const parsed = parseList(text);
  if (parsed === null) throw new Error("the list has no header");
  return parsed;
}

/** Keys of the .bib file are enough here; reading BibTeX is the server's part. */
function citations(): Map<string, KeyedCitation> {
  const keys = [...bib.matchAll(/^@\w+\{([^,]+),/gm)].map(([, key = ""]) => key);
  return new Map(keys.map((key) => [key, { identity: key, shortName: key }]));
}

function importText(text: string) {
  const parsed = list(text);
  return buildRows({
    list: parsed,
    csvName: "group-list.csv",
    bibName: "group-list.bib",
    columns: proposeColumns(parsed.header),
    words: [],
    citations: citations(),
  });
}

describe("the sample list", () => {
  const rows = importText(csv);
  const good = rows.filter((row) => row.refusals.length === 0);
  const at = (line: number) => rows.find((row) => row.line === line)!.fields;

  it("has every column proposed, each for another field", () => {
    const matches = proposeColumns(list(csv).header);
    expect(matches.filter((match) => match.field === null)).toEqual([]);
    expect(new Set(matches.map((match) => match.field)).size).toBe(matches.length);
  });

  it("has every word proposed", () => {
    const parsed = list(csv);
    const words = listWords(parsed, proposeColumns(parsed.header));
    expect(words.filter((word) => word.proposed === null)).toEqual([]);
  });

  it("gives sixteen good rows", () => {
    expect(good.map((row) => row.line)).toEqual([
      2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12, 13, 14, 15, 16, 17,
    ]);
  });

  it("refuses four rows, each once, with file, line, column and reason", () => {
    expect(rows.flatMap((row) => row.refusals)).toEqual([
      {
        file: "group-list.csv",
        line: 18,
        column: "value",
        reason: expect.stringMatching(/1\.20.*between 0 and 1/),
      },
      {
        file: "group-list.csv",
        line: 19,
        column: "zlo",
        reason: expect.stringMatching(/6\.7 is above the high end 6\.4/),
      },
      {
        file: "group-list.csv",
        line: 20,
        column: "value",
        reason: expect.stringMatching(/"O\.25" is not a number.*letter O/),
      },
      {
        file: "group-list.csv",
        line: 21,
        column: "key",
        reason: "The key Merlin2036 is not in group-list.bib.",
      },
    ]);
  });

  it("keeps what a row says, as printed", () => {
    expect(at(4)).toMatchObject({
      quantity: "neutralFraction",
      species: "neutral",
      scale: "linear",
      kind: "lowerLimit",
      value: "0.30",
      level: "percent95",
      weighting: "volume",
      methodTags: ["quasarDampingWing"],
      dataKnown: true,
      dataUsed: ["QSO-H 1418-11"],
      remark: "same spectrum as Arvensis2031",
    });
    expect(at(8)).toMatchObject({ value: null, limitBase: "0.03", limitSigma: "0.06" });
    expect(at(10)).toMatchObject({ level: "twoSigma", kind: "upperLimit" });
    expect(at(12)).toMatchObject({ level: "notStated", zRole: "sampleRange" });
    expect(at(13)).toMatchObject({ species: "ionized", level: "percent68" });
    expect(at(14)).toMatchObject({ conditionedOn: ["cmb"], methodTags: ["equivalentWidths"] });
    expect([at(6).alternativesGroup, at(7).alternativesGroup]).toEqual(["A1", "A1"]);
  });

  it("takes the redshift ends of an optical depth over a range as its range", () => {
    expect(at(16)).toMatchObject({
      quantity: "opticalDepthRange",
      rangeLow: "15",
      rangeHigh: "30",
      zLow: null,
      zHigh: null,
    });
  });

  it("reads the fractions of a duration from its word", () => {
    expect(at(17)).toMatchObject({
      quantity: "duration",
      species: "neutral",
      fractionFrom: "0.75",
      fractionTo: "0.25",
      durationUnit: "redshift",
    });
  });

  it("leaves open what the file lacks", () => {
    expect(good.every((row) => row.openFields.includes("versionRead"))).toBe(true);
    expect(good.filter((row) => row.openFields.length === 1).length).toBe(16);
  });

  it("gives every good row an identity of its own, the same the second time", () => {
    const identities = good.map((row) => row.identity);
    expect(new Set(identities).size).toBe(16);
    const again = importText(csv).filter((row) => row.refusals.length === 0);
    expect(again.map((row) => row.identity)).toEqual(identities);
  });
});

describe("parseList", () => {
  it("counts lines through quoted line breaks, comments, a byte order mark and carriage returns", () => {
    const parsed = list('\ufeff# ours\r\nkey,remark\r\nA,"two\r\nlines"\r\n\r\nB,x\r\n');
    expect(parsed.header).toEqual(["key", "remark"]);
    expect(parsed.rows.map((row) => [row.line, row.cells[0]])).toEqual([
      [3, "A"],
      [6, "B"],
    ]);
  });

  it("reads semicolons and tabs as well", () => {
    expect(list("key;z\nA;7.1\n").rows[0]?.cells).toEqual(["A", "7.1"]);
    expect(list("key\tz\nA\t7.1\n").rows[0]?.cells).toEqual(["A", "7.1"]);
  });

  it("has nothing to say about an empty file", () => {
    expect(parseList("\n\n")).toBeNull();
  });

  it("names a column that has no name, and one that has another's", () => {
    expect(list("key,,z,z\nA,,1,2\n").header).toEqual(["key", "column 2", "z", "z (2)"]);
  });

  it("says that a row has too many cells, or an open quotation mark", () => {
    const parsed = list('key,z\nA,7,1\nB,"7\n');
    expect(parsed.rows[0]?.problem).toMatch(/3 cells, the header 2/);
    expect(parsed.rows[1]?.problem).toMatch(/quotation mark/);
  });
});

describe("proposeColumns", () => {
  it("looks past case, punctuation and one slip, and gives no field twice", () => {
    expect(
      proposeColumns(["BibKey", "Z_min", "methdo", "Metod", "sigma +", "err_plus", "plus", "x"]),
    ).toEqual([
      { column: "BibKey", field: "citationKey" },
      { column: "Z_min", field: "zLow" },
      { column: "methdo", field: null },
      { column: "Metod", field: "methodTags" },
      { column: "sigma +", field: null },
      { column: "err_plus", field: null },
      { column: "plus", field: "plus" },
      { column: "x", field: "value" },
    ]);
  });
});

describe("proposeWords", () => {
  it.each([
    ["level", "0.68", "percent68"],
    ["level", "0.6827", "oneSigma"],
    ["level", "68.3%", "oneSigma"],
    ["level", "0.90", "percent90"],
    ["level", "95 %", "percent95"],
    ["level", "0.9545", "twoSigma"],
    ["level", "2σ", "twoSigma"],
    ["level", "99.7", "other:99.7"],
    ["level", "not stated", "notStated"],
    ["level", "120", null],
    ["level", "2", null],
    ["kind", "Upper-Limit", "upperLimit"],
    ["kind", "<", "upperLimit"],
    ["quantity", "Q_HII", "ionizedFraction"],
    ["quantity", "duration 0.75 to 0.25", "duration:0.75:0.25"],
    ["quantity", "redshift at fraction 0.5", "redshiftAtFraction:0.5"],
    ["quantity", "colour", null],
    ["methodTags", "Lyα fraction", "emitterFraction"],
    ["methodTags", "Damping wing (Quasar)", "quasarDampingWing"],
    ["conditionedOn", "fl-12", "FL-0012"],
    ["estimator", "best-fit", "bestFit"],
  ] as const)("reads the %s %p as %p", (field, word, value) => {
    expect(proposeWords(field, word)).toBe(value);
  });
});

describe("buildRows", () => {
  it("keeps a word that nobody matched in the remark", () => {
    const [row] = importText("key,quantity,method\nArvensis2031,neutral fraction,tea leaves\n");
    expect(row?.refusals).toEqual([]);
    expect(row?.fields.methodTags).toEqual([]);
    expect(row?.fields.remark).toBe('Not matched at import: Method: "tea leaves".');
  });

  it("takes what an optical depth assumed, a prior, and the printed fraction of a duration", () => {
    const [row, other] = importText(
      [
        "key,quantity,species,fraction from,fraction to,history,helium treatment,truncation,prior,prior range,cosmic variance",
        'Arvensis2031,optical depth,,,,tanh,"He II at z = 3.5",from z = 30,flat,0 to 1,in the error',
        "Arvensis2031,duration,ionised,0.25,0.75,,,,,,",
      ].join("\n"),
    );
    expect(row?.fields).toMatchObject({
      quantity: "opticalDepth",
      historyAssumed: "tanh",
      heliumAssumed: "He II at z = 3.5",
      truncationAssumed: "from z = 30",
      priorForm: "flat",
      priorRange: "0 to 1",
      cosmicVariance: "included",
    });
    expect(other?.fields).toMatchObject({
      quantity: "duration",
      species: "ionized",
      fractionFrom: "0.25",
      fractionTo: "0.75",
    });
  });

  it("takes records by their numbers, and a digitizing error as read off a figure", () => {
    const [row] = importText(
      "key,subset of,supersedes,digitizing error\nArvensis2031,fl-12; FL-0013; the big one,FL-0007.2,0.02\n",
    );
    expect(row?.fields).toMatchObject({
      subsetOf: ["FL-0012", "FL-0013"],
      supersedes: ["FL-0007"],
      digitizingError: "0.02",
      readOffFigure: true,
      remark: 'Not matched at import: Subset of: "the big one".',
    });
  });

  it("takes the person's match before the proposal, and leaves a field open when told so", () => {
    const parsed = list("key,level\nArvensis2031,0.68\nArvensis2031,0.95\n");
    const rows = buildRows({
      list: parsed,
      csvName: "a.csv",
      bibName: "b.bib",
      columns: proposeColumns(parsed.header),
      words: [
        { field: "level", word: "0.68", value: "oneSigma" },
        { field: "level", word: "0.95", value: null },
      ],
      citations: citations(),
    });
    expect(rows.map((row) => row.fields.level)).toEqual(["oneSigma", null]);
  });

  it("says which paper can't be read, and where", () => {
    const parsed = list("key,z\nBroken2030,7\n");
    const [row] = buildRows({
      list: parsed,
      csvName: "a.csv",
      bibName: "b.bib",
      columns: proposeColumns(parsed.header),
      words: [],
      citations: new Map([["Broken2030", { problem: "a brace is not closed.", line: 12 }]]),
    });
    expect(row?.refusals[0]?.reason).toBe(
      "The paper Broken2030 can't be read in b.bib, line 12: a brace is not closed.",
    );
  });

  it("points at an equal row further up", () => {
    const rows = importText("key,z\nArvensis2031,7\nArvensis2031,8\nArvensis2031,7\n");
    expect(rows.map((row) => row.sameAsLine)).toEqual([null, null, 2]);
  });

  it("has an outcome for every row of any text, and never throws", () => {
    const cell = fc.oneof(
      fc.constantFrom(
        "Arvensis2031",
        "neutral fraction",
        "0.42",
        "O.25",
        "upper limit",
        "duration 1 to 0",
        '"',
      ),
      fc.string({ unit: "binary", maxLength: 12 }),
    );
    const header = fc.shuffledSubarray([
      "key",
      "quantity",
      "kind",
      "value",
      "plus",
      "level",
      "zlo",
      "zhi",
      "x,y",
      "method",
    ]);
    fc.assert(
      fc.property(
        header,
        fc.array(fc.array(cell, { maxLength: 10 }), { maxLength: 5 }),
        (names, rows) => {
          const text = [names, ...rows].map((cells) => cells.join(",")).join("\n");
          const parsed = parseList(text);
          if (parsed === null) return;
          const built = buildRows({
            list: parsed,
            csvName: "a.csv",
            bibName: "b.bib",
            columns: proposeColumns(parsed.header),
            words: [],
            citations: citations(),
          });
          expect(built).toHaveLength(parsed.rows.length);
          for (const row of built) {
            expect(row.identity === "").toBe(row.refusals.length > 0);
            for (const refusal of row.refusals) expect(refusal.reason).toMatch(/\S/);
          }
        },
      ),
      { seed: 20261201, numRuns: 300 },
    );
  });

  it("gives rows of two papers two identities", () => {
    const [row] = importText("key,z\nArvensis2031,7\n");
    expect(rowIdentity(row!.fields, "a")).not.toBe(rowIdentity(row!.fields, "b"));
  });
});
