import { canonicalFilter, paramsToFilter } from "~shared/filter/address";
import { matchesFilter } from "~shared/filter/matches";
import { methodProblem, tidyMethod, type MethodWords } from "~shared/methods/entry";
import { START_VOCABULARY } from "~shared/methods/startVocabulary";
import {
  carriesTag,
  currentTag,
  currentTags,
  familiesOf,
  familyOf,
  findTag,
  methodsOf,
  methodTags,
  onVocabularyChange,
  setVocabulary,
  vocabulary,
  withVocabulary,
  type MethodTag,
} from "~shared/methods/vocabulary";
import { fieldsAgree } from "~shared/review/reading";
import { recordTitle } from "~shared/statement/notation";
import { fieldFindings } from "~shared/statement/rules";
import { fieldText, tagName } from "~shared/statement/words";

import { buildFields } from "../buildFields";

const retired = (...pairs: [tag: string, into: string][]): MethodTag[] =>
  START_VOCABULARY.map((entry) => ({
    ...entry,
    retiredInto: pairs.find(([tag]) => tag === entry.tag)?.[1] ?? null,
  }));

afterEach(() => setVocabulary(START_VOCABULARY));

describe("a retired tag", () => {
  beforeEach(() => setVocabulary(retired(["nearZones", "darkGaps"], ["darkGaps", "darkPixels"])));

  it("stands for what took it over, through every step", () => {
    expect(currentTag("nearZones")?.tag).toBe("darkPixels");
    expect(currentTags(["nearZones", "darkGaps", "darkPixels", "tea leaves"])).toEqual([
      "darkPixels",
      "tea leaves",
    ]);
    expect(carriesTag(["nearZones"], "darkGaps")).toBe(true);
    expect(carriesTag(["nearZones"], "forestOpacity")).toBe(false);
    expect(methodsOf(["nearZones", "kineticSz"]).map(({ tag }) => tag)).toEqual([
      "darkPixels",
      "kineticSz",
    ]);
  });

  it("is no choice any more, but its words are still understood", () => {
    expect(methodTags().map(({ tag }) => tag)).not.toContain("nearZones");
    expect(vocabulary()).toHaveLength(START_VOCABULARY.length);
    expect(findTag("proximity zones")?.tag).toBe("darkPixels");
  });

  it("gives a record the name, family, title and filter of what took it over", () => {
    const fields = buildFields({ methodTags: ["nearZones"] });
    expect(tagName("nearZones")).toBe("Dark pixels");
    expect(fieldText("methodTags", buildFields({ methodTags: ["nearZones", "darkPixels"] }))).toBe(
      "Dark pixels",
    );
    expect(familyOf(fields.methodTags)).toBe("darkPixels");
    expect(familiesOf(["nearZones", "forestOpacity"])).toEqual(["darkPixels", "forestOpacity"]);
    expect(canonicalFilter({ tags: ["nearZones", "darkGaps"] })).toEqual({ tags: ["darkPixels"] });
    expect(paramsToFilter({ tag: "nearZones" }).filter).toEqual({ tags: ["darkPixels"] });
    const record = {
      ...{
        quantity: null,
        kind: null,
        weighting: null,
        versionRead: null,
        zUsed: null,
        year: null,
      },
      ...{ families: ",darkPixels,", tags: ",darkPixels,", searchText: "" },
    };
    expect(matchesFilter(record, { tags: ["darkGaps"] })).toBe(true);
    expect(matchesFilter(record, { tags: ["kineticSz"] })).toBe(false);
  });

  it("is no error of a record, and one with what took it over in a second reading", () => {
    const fields = buildFields({ methodTags: ["nearZones"], cosmicVariance: "included" });
    expect(fieldFindings(fields, { citation: true })).toEqual([]);
    expect(fieldsAgree("methodTags", ["nearZones"], ["darkPixels"])).toBe(true);
    expect(fieldsAgree("methodTags", ["nearZones"], ["kineticSz"])).toBe(false);
    expect(fieldsAgree("methodTags", ["nearZones", "darkGaps"], ["darkPixels"])).toBe(true);
  });

  it("keeps the rule about one sightline", () => {
    setVocabulary(retired(["quasarDampingWing", "burstDampingWing"]));
    const codes = (methodTags: string[]) =>
      fieldFindings(buildFields({ methodTags, dataUsed: ["Object 7"] }), { citation: true }).map(
        ({ code }) => code,
      );
    expect(codes(["quasarDampingWing"])).toEqual(["oneSightline"]);
    expect(codes(["darkPixels"])).toEqual([]);
  });

  it("ends nowhere when the retirements run in a circle", () => {
    setVocabulary(retired(["darkGaps", "nearZones"], ["nearZones", "darkGaps"]));
    expect(currentTag("darkGaps")).toBeNull();
    expect(familyOf(["darkGaps"])).toBeNull();
    expect(findTag("dark gaps")).toBeNull();
  });
});

describe("the vocabulary in force", () => {
  it("stands by families, within each in the order given", () => {
    setVocabulary([...START_VOCABULARY].reverse());
    expect(methodTags()[0]?.tag).toBe("burstDampingWing");
    expect(methodTags().at(-1)?.tag).toBe("thermalHistory");
    expect(methodTags()).toBe(methodTags());
  });

  it("tells whoever listens of each change, until they stop", () => {
    const heard = jest.fn();
    const stop = onVocabularyChange(heard);
    setVocabulary(START_VOCABULARY);
    stop();
    setVocabulary(START_VOCABULARY);
    expect(heard).toHaveBeenCalledTimes(1);
  });

  it("can be another one for a while, and comes back, also after an error", () => {
    const other = retired(["darkGaps", "nearZones"]);
    expect(withVocabulary(other, () => tagName("darkGaps"))).toBe("Near zones");
    expect(tagName("darkGaps")).toBe("Dark gaps");
    expect(() =>
      withVocabulary(other, () => {
        throw new Error("on the way");
      }),
    ).toThrow("on the way");
    expect(tagName("darkGaps")).toBe("Dark gaps");
  });

  it("gives titles its names", () => {
    setVocabulary(
      START_VOCABULARY.map((entry) =>
        entry.tag === "galaxyDampingWing" ? { ...entry, name: "Wing of a galaxy" } : entry,
      ),
    );
    expect(recordTitle(buildFields())).toBe("Wing of a galaxy at z = 7.12");
  });

  it("starts with the trade's methods, each with its words", () => {
    expect(START_VOCABULARY).toHaveLength(23);
    for (const [index, entry] of START_VOCABULARY.entries()) {
      const others = START_VOCABULARY.filter((_, other) => other !== index);
      expect(methodProblem(tidyMethod({ ...entry, position: 10 }), others)).toBeNull();
    }
    expect(
      START_VOCABULARY.filter((entry) => entry.neverIndependent).map(({ tag }) => tag),
    ).toEqual(["sourceBudget", "jointInference"]);
  });
});

describe("an entry", () => {
  const words: MethodWords = {
    tag: "metalLines",
    family: "forestOpacity",
    name: "Metal lines",
    definition: "Ratios of ions.",
    caution: "Depends on the enrichment.",
    aliases: [],
    neverIndependent: false,
    position: 10,
  };

  it("is tidied: one blank between words, each spelling once", () => {
    expect(
      tidyMethod({
        ...words,
        tag: " metalLines ",
        name: "\tMetal \n lines",
        aliases: ["metal-lines", " OI lines", "oi  LINES", "", "  "],
      }),
    ).toEqual({ ...words, aliases: ["OI lines"] });
  });

  it.each<[Partial<MethodWords>, keyof MethodWords]>([
    [{ tag: "MetalLines" }, "tag"],
    [{ tag: "metal lines" }, "tag"],
    [{ tag: "m" }, "tag"],
    [{ tag: `m${"x".repeat(40)}` }, "tag"],
    [{ tag: "darkGaps" }, "tag"],
    [{ family: "tea" as never }, "family"],
    [{ name: "" }, "name"],
    [{ name: "x".repeat(61) }, "name"],
    [{ name: "…" }, "name"],
    [{ name: "Dark-gaps" }, "name"],
    [{ definition: "" }, "definition"],
    [{ caution: "x".repeat(201) }, "caution"],
    [{ aliases: ["mfp"] }, "aliases"],
    [{ aliases: ["?"] }, "aliases"],
    [{ aliases: ["x".repeat(81)] }, "aliases"],
    [{ position: 1.5 }, "position"],
    [{ position: 10_000 }, "position"],
    [{ position: Number.NaN }, "position"],
  ])("%j can't stand, because of its %s", (changes, field) => {
    expect(methodProblem({ ...words, ...changes }, START_VOCABULARY)?.field).toBe(field);
  });

  it("can stand otherwise, at the edges too", () => {
    for (const changes of [
      {},
      { tag: `m${"x".repeat(39)}` },
      { name: "x".repeat(60), definition: "y".repeat(200), caution: "z".repeat(200) },
      { position: 0 },
      { position: 9999, aliases: ["x".repeat(80)] },
    ]) {
      expect(methodProblem({ ...words, ...changes }, START_VOCABULARY)).toBeNull();
    }
  });
});
