import fc from "fast-check";

import {
  canonicalFilter,
  filterToParams,
  filterToQuery,
  isEmptyFilter,
  paramsToFilter,
} from "~shared/filter/address";
import { filterWords } from "~shared/filter/describe";
import { CONSTRAINT_SORTS } from "~shared/filter/filter";
import type { ConstraintFilter } from "~shared/filter/filter";
import { METHOD_FAMILIES, methodTags } from "~shared/methods/vocabulary";
import { RECORD_STATES } from "~shared/review/states";
import { QUANTITIES, STATEMENT_KINDS, VERSIONS_READ, WEIGHTINGS } from "~shared/statement/fields";

const listOf = <T>(words: readonly T[]) =>
  fc.option(fc.array(fc.constantFrom(...words), { maxLength: 5 }));

const arbitraryFilter: fc.Arbitrary<ConstraintFilter> = fc.record({
  text: fc.option(fc.string({ unit: "binary", maxLength: 300 })),
  families: listOf(METHOD_FAMILIES),
  tags: listOf(methodTags().map(({ tag }) => tag)),
  quantities: listOf(QUANTITIES),
  kinds: listOf(STATEMENT_KINDS),
  weightings: listOf(WEIGHTINGS),
  versions: listOf(VERSIONS_READ),
  states: listOf(RECORD_STATES),
  zFrom: fc.option(fc.oneof(fc.double(), fc.double({ min: 0, max: 40 }), fc.constant(1e-7))),
  zTo: fc.option(fc.double({ min: -1, max: 40 })),
  yearFrom: fc.option(fc.oneof(fc.integer({ min: 1900, max: 2100 }), fc.double())),
  yearTo: fc.option(fc.integer()),
});

describe("a filter's address", () => {
  it("gives the filter back, through a real query string", () => {
    fc.assert(
      fc.property(
        arbitraryFilter,
        fc.option(fc.constantFrom(...CONSTRAINT_SORTS)),
        (filter, sort) => {
          const canonical = canonicalFilter(filter);
          // Redshifts are told to twelve decimals: finer ones select nothing else.
          for (const end of ["zFrom", "zTo"] as const) {
            if (canonical[end] !== undefined) canonical[end] = Number(canonical[end].toFixed(12));
          }
          const wellFormed = {
            ...canonical,
            ...(canonical.text ? { text: canonical.text.toWellFormed() } : {}),
          };
          const query = filterToQuery(wellFormed, sort);
          const params = Object.fromEntries(new URLSearchParams(query));
          expect(paramsToFilter(params)).toEqual({ filter: canonicalFilter(wellFormed), sort });
        },
      ),
      { seed: 20261201, numRuns: 500 },
    );
  });

  it("has the parameters every address of Fogline shares", () => {
    const filter: ConstraintFilter = {
      text: "QSO-H 1418",
      families: ["cmb", "dampingWing"],
      tags: ["kineticSz"],
      kinds: ["upperLimit"],
      zFrom: 6,
      zTo: 8,
      yearFrom: 2020,
    };
    expect(filterToParams(filter, "newest")).toEqual({
      q: "QSO-H 1418",
      family: "dampingWing,cmb",
      tag: "kineticSz",
      kind: "upperLimit",
      z: "6-8",
      year: "2020-",
      sort: "newest",
    });
  });

  it("leaves out what it does not know", () => {
    expect(
      paramsToFilter({
        family: "dampingWing,tea",
        z: "six",
        kind: "",
        sort: "best",
        year: "x-2030",
        page: "2",
        tag: ["darkGaps", "x"],
      }),
    ).toEqual({ filter: { families: ["dampingWing"], tags: ["darkGaps"] }, sort: null });
    expect(paramsToFilter({ z: "-8" }).filter).toEqual({ zTo: 8 });
    expect(paramsToFilter({ z: "7" }).filter).toEqual({ zFrom: 7, zTo: 7 });
    expect(paramsToFilter({}).filter).toEqual({});
  });

  it("never throws on what a stranger puts into an address", () => {
    const value = fc.oneof(fc.string({ unit: "binary" }), fc.array(fc.string()), fc.constant(null));
    fc.assert(
      fc.property(
        fc.dictionary(
          fc.constantFrom("q", "family", "tag", "z", "year", "sort", "__proto__"),
          value,
        ),
        (params) => {
          const { filter } = paramsToFilter(params);
          expect(canonicalFilter(filter)).toEqual(filter);
        },
      ),
      { seed: 20261201 },
    );
  });
});

describe("a filter in words", () => {
  it("says everything that narrows the list", () => {
    expect(
      filterWords({
        families: ["dampingWing", "cmb", "twentyOneCm"],
        zFrom: 6,
        zTo: 8,
        yearTo: 2030,
      }),
    ).toBe("Family: damping wing, 21-cm signal or CMB; redshift 6 to 8; year up to 2030");
    expect(filterWords({ tags: ["emitterFraction"], text: "coral" })).toBe(
      'Text "coral"; method: Lyα emitter fraction',
    );
  });

  it("says so when nothing narrows it", () => {
    expect(filterWords({ families: [], text: " " })).toBe("All constraints");
    expect(isEmptyFilter({ families: [], text: " " })).toBe(true);
  });
});
