import { rowChanges, type ComparedRow } from "~shared/table/rowChanges";

const row = (changes: Partial<ComparedRow> = {}): ComparedRow => ({
  number: "FL-0042",
  revision: "FL-0042.1",
  state: "current",
  included: true,
  reason: null,
  ...changes,
});
const out = (reason: string | null, changes: Partial<ComparedRow> = {}) =>
  row({ included: false, reason, ...changes });

it("says nothing of rows that stay as they are", () => {
  expect(rowChanges([row()], [row()])).toEqual([]);
  expect(rowChanges([out("By hand")], [out("By hand")])).toEqual([]);
});

it.each<[string, ComparedRow[], ComparedRow[]]>([
  ["New, and in.", [], [row()]],
  ["New, and out: Preprint only.", [], [out("Preprint only")]],
  ["New, and out: no reason given.", [], [out(null)]],
  ["No longer among the records that match.", [row()], []],
  ["Revised: FL-0042.2 in place of FL-0042.1.", [row()], [row({ revision: "FL-0042.2" })]],
  ["Now superseded.", [row()], [row({ state: "superseded" })]],
  ["Would go out: Overlap.", [row()], [out("Overlap")]],
  ["Would go out: no reason given.", [row()], [out(null)]],
  ["Would come in.", [out("Overlap")], [row()]],
  ["Out for another reason: Withdrawn.", [out("Overlap")], [out("Withdrawn")]],
  ["Out for another reason: none given.", [out("Overlap")], [out(null)]],
  [
    "Revised: FL-0042.3 in place of FL-0042.1. Now superseded. Would go out: Superseded by FL-0050.",
    [row()],
    [out("Superseded by FL-0050", { revision: "FL-0042.3", state: "superseded" })],
  ],
])("%s", (words, then, now) => {
  expect(rowChanges(then, now)).toEqual([{ number: "FL-0042", words }]);
});

it("goes by the record's number, as a number", () => {
  const then = [row({ number: "FL-10000" }), row({ number: "FL-0007" })];
  const now = [row({ number: "FL-9999" })];
  expect(rowChanges(then, now).map(({ number }) => number)).toEqual([
    "FL-0007",
    "FL-9999",
    "FL-10000",
  ]);
});
