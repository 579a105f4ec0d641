import fc from "fast-check";

import { methodTags } from "~shared/methods/vocabulary";
import * as fields from "~shared/statement/fields";
import type { ConstraintFields, FieldName } from "~shared/statement/fields";

/** What people and machines type: numbers of every spelling, near-numbers, and anything else. */
export const typedText = fc.oneof(
  fc.constantFrom(
    "0.42",
    "0.30",
    "+0.19",
    "-0.17",
    "\u22120.5",
    ".5",
    "1",
    "3e-4",
    "O.25",
    "1,2",
    "",
    "1e99",
    "-99",
    "999",
  ),
  fc.double({ noNaN: true }).map(String),
  fc.string({ unit: "binary", maxLength: 30 }),
);

const choices: Partial<Record<FieldName, readonly string[]>> = {
  quantity: fields.QUANTITIES,
  species: fields.SPECIES,
  helium: fields.HELIUM,
  scale: fields.SCALES,
  weighting: fields.WEIGHTINGS,
  zRole: fields.REDSHIFT_ROLES,
  kind: fields.STATEMENT_KINDS,
  level: fields.LEVELS,
  estimator: fields.ESTIMATORS,
  cosmicVariance: fields.COSMIC_VARIANCES,
  versionRead: fields.VERSIONS_READ,
  durationUnit: fields.DURATION_UNITS,
  curveColumn: fields.CURVE_COLUMNS,
};

/** Tables of a curve, most of them good and some of them anything. */
const curveTables = fc
  .array(fc.tuple(typedText, typedText), { maxLength: 3 })
  .chain((odd) =>
    fc
      .integer({ min: 0, max: 40 })
      .map((rows) =>
        [
          ...odd.map((cells) => cells.join(",")),
          ...Array.from({ length: rows }, (_, i) => `${(i / 40).toFixed(3)},${1 + (i % 7)}`),
        ].join("\n"),
      ),
  );

function contentOf(name: FieldName): fc.Arbitrary<unknown> {
  const words = choices[name];
  if (words) return fc.option(fc.constantFrom(...words));
  if (name === "methodTags") {
    return fc.array(fc.oneof(fc.constantFrom(...methodTags().map(({ tag }) => tag)), typedText), {
      maxLength: 3,
    });
  }
  if (Array.isArray(fields.emptyFields()[name])) return fc.array(typedText, { maxLength: 3 });
  if (name === "dataKnown" || name === "alternativesPreferred" || name === "readOffFigure") {
    return fc.option(fc.boolean());
  }
  if (name === "curveTable") return fc.option(curveTables);
  return fc.option(typedText);
}

/** Fields in any state a form, a file or a stranger's request can bring them into. */
export const arbitraryFields: fc.Arbitrary<ConstraintFields> = fc.record(
  Object.fromEntries(
    (Object.keys(fields.emptyFields()) as FieldName[]).map((name) => [name, contentOf(name)]),
  ),
) as never;
