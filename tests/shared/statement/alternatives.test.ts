import { alternativesFindings } from "~shared/statement/alternatives";
import type { ConstraintFields } from "~shared/statement/fields";

import { buildFields } from "../buildFields";

const other = (overrides: Partial<ConstraintFields>, sameCitation = true) => ({
  number: "FL-0012",
  sameCitation,
  fields: buildFields({ alternativesGroup: "Dust", ...overrides }),
});
const codes = (
  overrides: Partial<ConstraintFields>,
  neighbours: Parameters<typeof alternativesFindings>[1],
) =>
  alternativesFindings(buildFields(overrides), neighbours).map(
    ({ grade, code }) => `${grade} ${code}`,
  );

describe("alternatives", () => {
  it("have one preferred answer at most, whatever the case of their label", () => {
    const preferred = { alternativesGroup: "dust ", alternativesPreferred: true };
    expect(codes(preferred, [other({ alternativesPreferred: true })])).toEqual([
      "error preferredTwice",
    ]);
    expect(codes(preferred, [other({ alternativesPreferred: false })])).toEqual([]);
    expect(
      codes({ ...preferred, alternativesPreferred: false }, [
        other({ alternativesPreferred: true }),
      ]),
    ).toEqual([]);
    // A label counts within its paper.
    expect(codes(preferred, [other({ alternativesPreferred: true }, false)])).toEqual([
      "note groupOfOne",
    ]);
  });

  it("need a group for one of them to be preferred", () => {
    expect(codes({ alternativesPreferred: true }, [])).toEqual(["error preferredWithoutGroup"]);
    expect(codes({ alternativesPreferred: null }, [])).toEqual([]);
  });
});
