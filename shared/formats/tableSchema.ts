/** The published JSON Schema of a fitting table's JSON file. */
import { FORM_NAMES } from "~shared/likelihood";
import { RECORD_STATES } from "~shared/review/states";
import { emptyFields } from "~shared/statement/fields";
import { DECISION_KINDS } from "~shared/table/decision";

const text = { type: "string" } as const;
const textOrNull = { type: ["string", "null"] } as const;
const numberOrNull = { type: ["number", "null"] } as const;
const flag = { type: "boolean" } as const;
const texts = { type: "array", items: text } as const;
const digest = { type: "string", pattern: "^[0-9a-f]{64}$" } as const;

type Properties = Record<string, object>;

/** An object that holds these members, all of them and no other. */
function exactly(properties: Properties, description?: string): object {
  return {
    type: "object",
    ...(description === undefined ? {} : { description }),
    properties,
    required: Object.keys(properties),
    additionalProperties: false,
  };
}

function orNull(schema: object): object {
  return { anyOf: [schema, { type: "null" }] };
}

/** What the paper prints: texts keep their digits, lists are lists, flags may be open. */
function printedFields(): Properties {
  return Object.fromEntries(
    Object.entries(emptyFields()).map(([name, open]) => [
      name,
      Array.isArray(open) ? texts : { type: ["string", "boolean", "null"] },
    ]),
  );
}

const likelihood = exactly(
  {
    form: { enum: FORM_NAMES },
    formula: text,
    redshift: { enum: ["point", "binMean", "averagedLikelihood"] },
    level: { ...numberOrNull, description: "As printed or decided, a probability." },
    smoothing: numberOrNull,
    curve: {
      ...orNull(
        exactly({
          x: { type: "array", items: { type: "number" } },
          p: { type: "array", items: { type: "number", minimum: 0 } },
        }),
      ),
      description: "Nodes decided on in place of the record's own, which stand in used.",
    },
    reason: { ...textOrNull, description: "Why another form than the default." },
  },
  "Form and parameters of the row's likelihood; every number of the statement stands in used.",
);

const row = exactly({
  record: { type: "string", pattern: "^FL-\\d{4,}$" },
  revision: { type: "string", pattern: "^FL-\\d{4,}\\.\\d+$" },
  state: { enum: RECORD_STATES },
  included: flag,
  reason: { ...textOrNull, description: "Why it is out; null for a row that is in." },
  cautions: texts,
  citation: exactly({
    key: text,
    shortName: text,
    year: { type: ["integer", "null"] },
    doi: textOrNull,
    arxiv: textOrNull,
    bibcode: textOrNull,
  }),
  printed: {
    type: "object",
    description:
      "As printed: numbers are texts that keep their digits; null where nothing is stated.",
    properties: printedFields(),
  },
  used: {
    type: ["object", "null"],
    description:
      "As used: fractions are neutral, numbers stand at the printed level; a limit is told by its kind, and every width it lacks is null. A tabulated curve has its nodes in curve: places x, ascending, in the variable of evaluatedIn, and likelihood p over its peak.",
    required: ["quantity", "kind", "evaluatedIn", "value", "plus", "minus", "level", "steps"],
  },
  likelihood: orNull(likelihood),
  weight: { type: "number", exclusiveMinimum: 0, maximum: 1 },
  mixture: {
    ...textOrNull,
    description: "Label of the alternatives it enters with as one mixture.",
  },
  correlatedSet: { ...textOrNull, description: "Id of the correlated set it enters with." },
});

const decision = exactly({
  id: text,
  kind: { enum: DECISION_KINDS },
  rows: texts,
  words: text,
  options: {
    type: "array",
    items: exactly({ code: text, words: text, override: flag }),
    minItems: 1,
  },
  proposed: text,
  because: text,
  taken: exactly({
    id: text,
    option: text,
    by: { enum: ["default", "person"] },
    reason: textOrNull,
  }),
});

export const TABLE_SCHEMA = {
  $schema: "https://json-schema.org/draft/2020-12/schema",
  title: "A fitting table of constraints on the neutral-fraction history",
  ...exactly({
    $schema: text,
    format: { const: "fogline-fitting-table/2" },
    digest: { type: "string", pattern: "^sha256:[0-9a-f]{64}$" },
    digestOver: text,
    name: text,
    version: { type: "integer", minimum: 1 },
    address: text,
    lastEvent: exactly({ sequence: { type: "integer" }, digest, at: text }),
    content: exactly({
      cautions: texts,
      decisions: { type: "array", items: decision },
      demonstration: flag,
      filter: exactly({ words: text, recipe: { type: "object" } }),
      licence: text,
      mixtures: {
        type: "array",
        items: exactly({ label: text, members: texts, standardDeviation: numberOrNull }),
      },
      papers: { type: "array", items: exactly({ key: text, bibtex: text, csl: text }) },
      registry: text,
      rows: { type: "array", items: row },
      sets: {
        type: "array",
        items: exactly({
          id: text,
          label: text,
          members: texts,
          rho: { type: "array", items: { type: "array", items: { type: "number" } } },
          whole: flag,
        }),
      },
      source: exactly({
        release: { type: ["integer", "null"] },
        lastEvent: orNull(exactly({ sequence: { type: "integer" }, digest })),
      }),
    }),
  }),
} as const;
