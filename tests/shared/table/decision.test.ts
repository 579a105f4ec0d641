import { FORM_NAMES, rowLikelihood } from "~shared/likelihood";
import { asUsed } from "~shared/statement/asUsed";
import type { ConstraintFields } from "~shared/statement/fields";
import { choosableForms } from "~shared/table/choosableForms";
import { REASON_LONGEST, settles, takeProposal, type TakenDecision } from "~shared/table/decision";

import { buildFields } from "../buildFields";

describe("a stored choice", () => {
  const decision = {
    id: "overlap:FL-0003+FL-0007",
    options: [
      { code: "keep:FL-0007", words: "Keep the later one", override: false },
      { code: "keep:FL-0003", words: "Keep the earlier one", override: false },
      { code: "both", words: "Keep both", override: true },
    ],
    proposed: "keep:FL-0007",
  };
  const settled = (changes: Partial<TakenDecision>, of = decision) =>
    settles(of, {
      id: decision.id,
      option: "keep:FL-0007",
      by: "person",
      reason: null,
      ...changes,
    });

  it("settles as proposed, by default or by a person, without a reason", () => {
    expect(settles(decision, takeProposal(decision))).toBe(true);
    expect(settled({})).toBe(true);
    expect(settled({ reason: "I looked" })).toBe(true);
  });

  it("needs a reason where it differs from the proposal or goes against a rule", () => {
    for (const option of ["keep:FL-0003", "both"]) {
      for (const reason of [null, "", "  \n"]) expect(settled({ option, reason })).toBe(false);
      expect(settled({ option, reason: "Other parts of the field" })).toBe(true);
    }
    expect(settled({ option: "both" }, { ...decision, proposed: "both" })).toBe(false);
  });

  it("can't be taken by default but for the proposal, and never against a rule", () => {
    expect(settled({ by: "default", option: "keep:FL-0003", reason: "x" })).toBe(false);
    const overriding = { ...decision, proposed: "both" };
    expect(settles(overriding, takeProposal(overriding))).toBe(false);
  });

  it("belongs to its decision, and to an option that there still is", () => {
    expect(settled({ id: "overlap:FL-0003+FL-0008" })).toBe(false);
    expect(settled({ option: "keep:FL-0001", reason: "x" })).toBe(false);
  });

  it("has a reason of bounded length, counted without the space around it", () => {
    const longest = "x".repeat(REASON_LONGEST);
    expect(settled({ reason: `  ${longest}  ` })).toBe(true);
    expect(settled({ reason: `${longest}x` })).toBe(false);
  });
});

describe("the forms to choose from", () => {
  const forms = (changes: Partial<ConstraintFields>, level?: number) =>
    choosableForms(asUsed(buildFields(changes)), level === undefined ? {} : { level });
  const unequal = { plus: "0.19", minus: "0.17", estimator: "median" } as const;
  const limit = {
    kind: "upperLimit",
    value: "0.30",
    plus: null,
    minus: null,
    level: "percent95",
  } as const;

  it("begin with the default, each once", () => {
    for (const changes of [unequal, limit]) {
      const found = forms(changes);
      const byDefault = rowLikelihood(asUsed(buildFields(changes))!, {});
      expect(found[0]).toBe("form" in byDefault && byDefault.form);
      expect(new Set(found).size).toBe(found.length);
    }
  });

  it("are those of the kind of statement", () => {
    expect(forms(unequal)[0]).toBe("quantileMatched");
    expect([...forms(unequal)].sort()).toEqual(["quantileMatched", "twoPiece", "variableWidth"]);
    // Equal sides leave a Gaussian possible, too.
    expect(forms({ plus: "0.10", minus: "0.10", estimator: "mean" })).toContain("gaussian");
    for (const form of forms(limit)) {
      expect([
        "halfGaussianBounded",
        "halfGaussianUnbounded",
        "flatThenGaussian",
        "smoothedStep",
        "hardStep",
      ]).toContain(form);
    }
  });

  it("are the same whatever form is chosen now", () => {
    const used = asUsed(buildFields(unequal))!;
    for (const form of FORM_NAMES) {
      expect(choosableForms(used, { form })).toEqual(choosableForms(used, {}));
    }
  });

  it("are none without a statement", () => {
    expect(choosableForms(null, {})).toEqual([]);
  });

  it("need a level, printed or decided", () => {
    const open = forms({ ...unequal, level: "notStated" });
    const decided = forms({ ...unequal, level: "notStated" }, 0.68);
    expect(open).toEqual([]);
    expect(decided).toEqual(forms(unequal));
  });
});
