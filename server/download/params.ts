import { HttpProblem } from "~server/common/errors";
import { paramsToFilter } from "~shared/filter/address";
import { CONSTRAINT_SORTS, type CanonicalFilter, type ConstraintSort } from "~shared/filter/filter";
import { METHOD_FAMILIES, vocabulary } from "~shared/methods/vocabulary";
import { RECORD_STATES } from "~shared/review/states";
import { QUANTITIES, STATEMENT_KINDS, VERSIONS_READ, WEIGHTINGS } from "~shared/statement/fields";

type Query = Record<string, unknown>;

const WORDS: Record<string, readonly string[] | (() => readonly string[])> = {
  family: METHOD_FAMILIES,
  // A retired tag still means what took it over.
  tag: () => vocabulary().map(({ tag }) => tag),
  quantity: QUANTITIES,
  kind: STATEMENT_KINDS,
  weighting: WEIGHTINGS,
  version: VERSIONS_READ,
  state: RECORD_STATES,
  sort: CONSTRAINT_SORTS,
};
const RANGES: Record<string, { example: string; end: RegExp }> = {
  z: { example: "6-8", end: /^(?:\d{1,4}(?:\.\d{1,6})?)?$/ },
  year: { example: "2020-2030", end: /^(?:\d{4})?$/ },
};
const PARAMETERS = ["q", ...Object.keys(WORDS), ...Object.keys(RANGES)];
const LONGEST_TEXT = 200;

/**
 * The filter and sort of a download. The client's own pages pass over what they don't know; a
 * pipeline must hear of it, or a mistyped word would hand it the whole registry.
 *
 * @throws {HttpProblem} 400, naming the parameter and what it takes.
 */
export function downloadParams(query: Query): {
  filter: CanonicalFilter;
  sort: ConstraintSort | null;
} {
  for (const [name, value] of Object.entries(query)) {
    if (!PARAMETERS.includes(name)) {
      throw bad(`There is no parameter “${shown(name)}”. There are: ${PARAMETERS.join(", ")}.`);
    }
    if (typeof value !== "string") throw bad(`Give “${name}” once; separate words by commas.`);
    check(name, value);
  }
  return paramsToFilter(query as Record<string, string>);
}

function check(name: string, value: string): void {
  const known = WORDS[name];
  const words = typeof known === "function" ? known() : known;
  const range = RANGES[name];
  if (name === "q" && value.length > LONGEST_TEXT) {
    throw bad(`“q” takes at most ${LONGEST_TEXT} characters.`);
  }
  if (words && value !== "") {
    const given = name === "sort" ? [value] : value.split(",").map((word) => word.trim());
    const unknown = given.find((word) => !words.includes(word));
    if (unknown !== undefined) {
      throw bad(`“${name}” does not know “${shown(unknown)}”. It takes: ${words.join(", ")}.`);
    }
  }
  if (range && value !== "") {
    const ends = value.split(/[-–]/).map((end) => end.trim());
    const [from = "", to = from] = ends;
    const whole = ends.length <= 2 && [from, to].every((end) => range.end.test(end));
    if (!whole || (from === "" && to === "")) {
      throw bad(
        `“${name}” takes a range like ${range.example}; either end may be missing. “${shown(value)}” is none.`,
      );
    }
    if (from !== "" && to !== "" && Number(from) > Number(to)) {
      throw bad(`“${name}” runs from a lower to a higher end; “${shown(value)}” doesn't.`);
    }
  }
}

function shown(text: string): string {
  return text.length > 60 ? `${text.slice(0, 60)}…` : text;
}

function bad(sentence: string): HttpProblem {
  return new HttpProblem(400, "BAD_PARAMETER", sentence);
}
