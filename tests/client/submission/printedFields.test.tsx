import { changeShape, isRelevant } from "@/components/statement/printedFields";
import { type ConstraintFields, emptyFields } from "~shared/statement/fields";

const twoSided: ConstraintFields = {
  ...emptyFields(),
  quantity: "neutralFraction",
  kind: "twoSided",
  value: "0.40",
  plus: "0.17",
  minus: "0.11",
};

describe("changeShape", () => {
  it("leaves no number in the record that the new statement has no meaning for", () => {
    const { fields } = changeShape(twoSided, "kind", "upperLimit", {});
    expect(fields.value).toBe("0.40");
    expect(fields.plus).toBeNull();
    expect(fields.minus).toBeNull();
  });

  it("brings back what was typed when the slip is undone", () => {
    const away = changeShape(twoSided, "kind", "band", {});
    const back = changeShape(away.fields, "kind", "twoSided", away.stash);
    expect(back.fields).toEqual(twoSided);
  });

  it("does not bring a stashed number back over one typed since", () => {
    const away = changeShape(twoSided, "kind", "upperLimit", {});
    const typed = { ...away.fields, value: "0.6" };
    const back = changeShape(typed, "kind", "twoSided", away.stash);
    expect(back.fields.value).toBe("0.6");
    expect(back.fields.plus).toBe("0.17");
  });
});

describe("isRelevant", () => {
  it("asks an optical depth for no redshift, and a fraction for one", () => {
    expect(isRelevant("z", { ...emptyFields(), quantity: "opticalDepth" })).toBe(false);
    expect(isRelevant("z", { ...emptyFields(), quantity: "neutralFraction" })).toBe(true);
  });

  it("asks for a digitizing error only when the number was read off a figure", () => {
    expect(isRelevant("digitizingError", emptyFields())).toBe(false);
    expect(isRelevant("digitizingError", { ...emptyFields(), readOffFigure: true })).toBe(true);
  });
});
