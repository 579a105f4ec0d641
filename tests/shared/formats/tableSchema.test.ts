import Ajv2020 from "ajv/dist/2020";

import { TABLE_SCHEMA } from "~shared/formats/tableSchema";
import { FORM_NAMES, rowLikelihood } from "~shared/likelihood";
import { RECORD_STATES } from "~shared/review/states";
import { asUsed } from "~shared/statement/asUsed";
import { DECISION_KINDS } from "~shared/table/decision";

import { buildFields } from "../buildFields";

type Json = Record<string, unknown>;

const DIGEST = "0123456789abcdef".repeat(4);
const fields = buildFields();
const used = asUsed(fields);

const likelihood: Json = {
  form: "twoPiece",
  formula: "…",
  redshift: "point",
  level: 0.68,
  smoothing: null,
  curve: null,
  reason: null,
};

const row: Json = {
  record: "FL-0042",
  revision: "FL-0042.1",
  state: "current",
  included: true,
  reason: null,
  cautions: [],
  citation: {
    key: "Arvensis2031",
    shortName: "Arvensis et al. 2031",
    year: 2031,
    doi: null,
    arxiv: null,
    bibcode: null,
  },
  printed: fields,
  used,
  likelihood,
  weight: 1,
  mixture: null,
  correlatedSet: null,
};

const decision: Json = {
  id: "levelNotStated:FL-0042",
  kind: "levelNotStated",
  rows: ["FL-0042"],
  words: "The paper states no level.",
  options: [{ code: "level:0.6827", words: "68.27 %", override: false }],
  proposed: "level:0.6827",
  because: "It is what most papers mean.",
  taken: {
    id: "levelNotStated:FL-0042",
    option: "level:0.6827",
    by: "default",
    reason: null,
  },
};

const content: Json = {
  cautions: ["Cite the originals."],
  decisions: [decision],
  demonstration: true,
  filter: { words: "All constraints", recipe: {} },
  licence: "CC BY 4.0",
  mixtures: [{ label: "model", members: ["FL-0042"], standardDeviation: null }],
  papers: [{ key: "Arvensis2031", bibtex: "@misc{…}", csl: "{}" }],
  registry: "Fogline",
  rows: [row],
  sets: [
    {
      id: "s1",
      label: "Bins",
      members: ["FL-0042", "FL-0043"],
      rho: [
        [1, 0.2],
        [0.2, 1],
      ],
      whole: true,
    },
  ],
  source: { release: null, lastEvent: { sequence: 7, digest: DIGEST } },
};

const file: Json = {
  $schema: "https://fogline.example/api/schemas/fitting-table-2.json",
  format: "fogline-fitting-table/2",
  digest: `sha256:${DIGEST}`,
  digestOver: "SHA-256 over the RFC 8785 form of content",
  name: "Wings",
  version: 1,
  address: "https://fogline.example/tables/wings",
  lastEvent: { sequence: 7, digest: DIGEST, at: "2026-12-01T06:00:00.000Z" },
  content,
};

/** An unknown or misspelt keyword of the schema throws. */
const validate = new Ajv2020({ allowUnionTypes: true }).compile(TABLE_SCHEMA);

/** Where a file leaves the schema; empty for one that keeps to it. */
function faults(changed: Json): string[] {
  return validate(changed) ? [] : (validate.errors ?? []).map(({ instancePath }) => instancePath);
}
const withContent = (changes: Json) => ({ ...file, content: { ...content, ...changes } });
const withRow = (changes: Json) => withContent({ rows: [{ ...row, ...changes }] });
const withDecision = (changes: Json) => withContent({ decisions: [{ ...decision, ...changes }] });

it("takes a whole file", () => {
  expect(faults(file)).toEqual([]);
});

describe("every member is required, and no other is known", () => {
  const objects: readonly (readonly [name: string, of: Json, put: (changed: Json) => Json])[] = [
    ["the file", file, (changed) => changed],
    ["its content", content, (changed) => ({ ...file, content: changed })],
    ["a row", row, (changed) => withContent({ rows: [changed] })],
    ["a likelihood", likelihood, (changed) => withRow({ likelihood: changed })],
    ["a decision", decision, (changed) => withContent({ decisions: [changed] })],
  ];
  it.each(objects)("of %s", (_, whole, put) => {
    for (const name of Object.keys(whole)) {
      const { [name]: _taken, ...rest } = whole;
      expect([name, faults(put(rest)).length > 0]).toEqual([name, true]);
    }
    expect(faults(put({ ...whole, surprise: 1 }))).not.toEqual([]);
  });
});

it("takes what a paper prints with fewer fields: releases keep what an older program wrote", () => {
  const { place: _place, ...older } = fields;
  expect(faults(withRow({ printed: older }))).toEqual([]);
});

it.each(RECORD_STATES)("takes a row of a record that is %s", (state) => {
  expect(faults(withRow({ state }))).toEqual([]);
});

it.each(FORM_NAMES)("takes the likelihood form %s", (form) => {
  expect(faults(withRow({ likelihood: { ...likelihood, form } }))).toEqual([]);
});

it.each(DECISION_KINDS)("takes a decision of kind %s", (kind) => {
  expect(faults(withDecision({ kind }))).toEqual([]);
});

it("takes a row that is out: nothing used, no likelihood, a reason", () => {
  expect(
    faults(withRow({ included: false, reason: "Withdrawn", used: null, likelihood: null })),
  ).toEqual([]);
});

it("takes the redshift treatments that a likelihood names", () => {
  const settled = rowLikelihood(used!, {});
  if ("leftOut" in settled) throw new Error("the row was left out");
  expect(faults(withRow({ likelihood: { ...likelihood, redshift: settled.redshift } }))).toEqual(
    [],
  );
  expect(faults(withRow({ likelihood: { ...likelihood, redshift: "middle" } }))).not.toEqual([]);
});

it.each<[string, Json]>([
  ["a number as printed that lost its digits", withRow({ printed: { ...fields, value: 0.42 } })],
  ["a record's number without its letters", withRow({ record: "42" })],
  ["a revision without its ordinal", withRow({ revision: "FL-0042" })],
  ["a weight of zero", withRow({ weight: 0 })],
  ["a weight above one", withRow({ weight: 1.5 })],
  ["an unknown state", withRow({ state: "lost" })],
  ["what is used without its kind", withRow({ used: { ...used, kind: undefined } })],
  ["an unknown form", withRow({ likelihood: { ...likelihood, form: "box" } })],
  [
    "a curve with a negative likelihood",
    withRow({ likelihood: { ...likelihood, curve: { x: [0, 1], p: [1, -1] } } }),
  ],
  ["a decision that is open", withDecision({ taken: null })],
  ["a decision without options", withDecision({ options: [] })],
  [
    "a decision taken by nobody known",
    withDecision({ taken: { ...(decision.taken as Json), by: "x" } }),
  ],
  ["a digest of another length", { ...file, digest: `sha256:${DIGEST}0` }],
  ["another format", { ...file, format: "fogline-fitting-table/1" }],
  ["version zero", { ...file, version: 0 }],
])("refuses %s", (_, changed) => {
  expect(faults(JSON.parse(JSON.stringify(changed)) as Json)).not.toEqual([]);
});
