/** How a statement is set: as a paper would, as printed or as used, ready to be drawn or written. */
import { currentTag, familyOf, methodsOf } from "~shared/methods/vocabulary";

import { widthText } from "./asUsed";
import type { AsUsed } from "./asUsed";
import { isPrintedNumber, parseDecimal } from "./decimal";
import type { ConstraintFields, Quantity, Species } from "./fields";
import { KIND_WORDS, QUANTITY_WORDS, levelPhrase, tagName, withTrueMinus } from "./words";

export const NOTATION_SYMBOLS = [
  "xHI",
  "xHII",
  "xe",
  "logxHI",
  "logxHII",
  "logxe",
  "tau",
  "tauRange",
  "z",
  "dz",
  "dt",
] as const;
export type NotationSymbol = (typeof NOTATION_SYMBOLS)[number];

/** A plain-text spelling of each symbol. */
export const SYMBOL_TEXT: Record<NotationSymbol, string> = {
  xHI: "x_HI",
  xHII: "x_HII",
  xe: "x_e",
  logxHI: "log10 x_HI",
  logxHII: "log10 x_HII",
  logxe: "log10 x_e",
  tau: "τ",
  tauRange: "τ",
  z: "z",
  dz: "Δz",
  dt: "Δt",
};

/** One statement set as a paper sets it. Numbers are unsigned texts for plus and minus, signed with a true minus elsewhere. */
export interface Notation {
  symbol: NotationSymbol;
  /** What stands in brackets behind the symbol: "15, 30" for an optical depth over a range; "" otherwise. */
  argument: string;
  /** "in" stands before a band's two ends, "" when there is no number. */
  relation: "=" | "<" | ">" | "in" | "";
  value: string | null;
  plus: string | null;
  minus: string | null;
  /** Ends of a band. */
  low: string | null;
  high: string | null;
  /** Own sigma of a limit, set behind its base: "0.03 + 0.06". */
  limitSigma: string | null;
  /** Unit behind the number: "Myr" or "". */
  unit: string;
  /** "at 95 %", "level not stated", or what stands instead of a number. */
  tail: string;
  /** The stated numbers rest on an assumption, and say so. */
  derived: boolean;
}

function symbolOf(
  quantity: Quantity | null,
  species: Species | null,
  log: boolean,
  unit: string,
): NotationSymbol {
  switch (quantity) {
    case "opticalDepth":
      return "tau";
    case "opticalDepthRange":
      return "tauRange";
    case "redshiftAtFraction":
      return "z";
    case "duration":
      return unit === "Myr" ? "dt" : "dz";
    default: {
      const plain = species === "ionized" ? "xHII" : species === "electron" ? "xe" : "xHI";
      return log ? `log${plain}` : plain;
    }
  }
}

function shown(text: string | null): string | null {
  return text === null || text.trim() === "" ? null : withTrueMinus(text.trim());
}

/** Plus and minus without the sign they may have been typed with. */
function shownWidth(text: string | null): string | null {
  if (text === null || text.trim() === "") return null;
  return isPrintedNumber(text) ? text.trim().replace(/^[+\-\u2212\u2013]/, "") : text.trim();
}

function argumentOf(low: string | null, high: string | null): string {
  return low === null && high === null ? "" : `${low ?? "?"}, ${high ?? "?"}`;
}

/** The statement as the paper prints it: its species, its scale, its digits. */
export function notationAsPrinted(fields: ConstraintFields): Notation {
  const unit = fields.quantity === "duration" && fields.durationUnit === "myr" ? "Myr" : "";
  const log = fields.quantity === "neutralFraction" && fields.scale === "log10";
  const limit = fields.kind === "upperLimit" || fields.kind === "lowerLimit";
  const own = limit && shown(fields.limitBase) !== null;
  const band = fields.kind === "band";
  const value = band ? null : own ? shown(fields.limitBase) : shown(fields.value);
  const two = fields.kind === "twoSided" || fields.kind === "curve" || fields.kind === null;
  return {
    symbol: symbolOf(fields.quantity, fields.species, log, unit),
    argument:
      fields.quantity === "opticalDepthRange"
        ? argumentOf(shown(fields.rangeLow), shown(fields.rangeHigh))
        : "",
    relation: relationOf(fields.kind, value !== null || band),
    value: fields.kind === "qualitative" ? null : value,
    plus: two ? shownWidth(fields.plus) : null,
    minus: two ? shownWidth(fields.minus) : null,
    low: band ? shown(fields.bandLow) : null,
    high: band ? shown(fields.bandHigh) : null,
    limitSigma: own ? shownWidth(fields.limitSigma) : null,
    unit,
    tail: tailOf(fields.kind, levelPhrase(fields.level, fields.levelPercent), value !== null),
    derived: false,
  };
}

function relationOf(kind: ConstraintFields["kind"], numbers: boolean): Notation["relation"] {
  if (!numbers || kind === "qualitative") return "";
  if (kind === "upperLimit") return "<";
  if (kind === "lowerLimit") return ">";
  return kind === "band" ? "in" : "=";
}

function tailOf(kind: ConstraintFields["kind"], level: string, numbers: boolean): string {
  if (kind === "qualitative") return KIND_WORDS.qualitative.toLowerCase();
  if (kind !== "curve") return level;
  const curve = KIND_WORDS.curve.toLowerCase();
  return numbers && level !== "" ? `${level}, ${curve}` : curve;
}

/** Long computed texts are cut for the eye only; printed digits and exact flips stay as they are. */
function forTheEye(text: string | null): string | null {
  if (text === null) return null;
  const decimals = text.split(".")[1]?.length ?? 0;
  const value = parseDecimal(text);
  if (decimals <= 7 || value === null) return withTrueMinus(text);
  return withTrueMinus(Number(value.toNumber().toPrecision(3)).toString());
}

/** The statement in the registry's convention, at its printed level. */
export function notationAsUsed(used: AsUsed): Notation {
  const unit = used.durationUnit === "myr" ? "Myr" : "";
  const value = used.value ?? used.limitBase;
  const level = used.level === null ? "level not stated" : `at ${percentText(used.level)}`;
  return {
    symbol: symbolOf(used.quantity, "neutral", used.evaluatedIn === "log10", unit),
    argument:
      used.quantity === "opticalDepthRange"
        ? argumentOf(numberText(used.rangeLow), numberText(used.rangeHigh))
        : "",
    relation: relationOf(used.kind, value !== null || used.low !== null),
    value: forTheEye(value),
    plus: forTheEye(widthText(used.plus)),
    minus: forTheEye(widthText(used.minus)),
    low: forTheEye(used.low),
    high: forTheEye(used.high),
    limitSigma: forTheEye(used.limitSigma),
    unit,
    tail: tailOf(used.kind, level, value !== null),
    derived: used.valueDerived,
  };
}

function numberText(value: number | null): string | null {
  return value === null ? null : String(value);
}

/** "68 %", "68.27 %": the level's probability in percent. */
export function percentText(probability: number): string {
  return `${Number((probability * 100).toPrecision(8))} %`;
}

/** One line of plain text: "0.42 +0.19 −0.17", "< 0.30", "< 0.03 + 0.06", "0.3 to 0.7"; "" without numbers. */
export function shortText(notation: Notation): string {
  const unit = notation.unit === "" ? "" : ` ${notation.unit}`;
  if (notation.low !== null || notation.high !== null) {
    return `${notation.low ?? "?"} to ${notation.high ?? "?"}${unit}`;
  }
  if (notation.value === null) return "";
  const sign =
    notation.relation === "<" || notation.relation === ">" ? `${notation.relation} ` : "";
  return `${sign}${notation.value}${widthsText(notation)}${unit}`;
}

function widthsText({ plus, minus, limitSigma, relation }: Notation): string {
  if (limitSigma !== null) return relation === ">" ? ` \u2212 ${limitSigma}` : ` + ${limitSigma}`;
  if (plus === null && minus === null) return "";
  if (plus === minus) return ` ± ${plus}`;
  return `${plus === null ? "" : ` +${plus}`}${minus === null ? "" : ` \u2212${minus}`}`;
}

/** A whole line with its symbol and level: "x_HI < 0.30 at 95 %". */
export function lineText(notation: Notation): string {
  const argument = notation.argument === "" ? "" : `(${notation.argument})`;
  const head = SYMBOL_TEXT[notation.symbol] + argument;
  const text = shortText(notation);
  const relation = notation.relation === "=" ? "= " : notation.relation === "in" ? "from " : "";
  return [head, relation + text, notation.tail].filter((part) => part !== "").join(" ");
}

/** What a record is called in lists: "Quasar damping wing at z = 7.51". Holds no number of the statement itself. */
export function recordTitle(fields: ConstraintFields): string {
  const method = methodTitle(fields.methodTags);
  const z = shown(fields.z);
  const low = shown(fields.zLow);
  const high = shown(fields.zHigh);
  switch (fields.quantity) {
    case "opticalDepth":
      return `${method}: total optical depth`;
    case "opticalDepthRange": {
      const ends = [shown(fields.rangeLow), shown(fields.rangeHigh)];
      return ends.includes(null)
        ? `${method}: optical depth over a redshift range`
        : `${method}: optical depth from z = ${ends[0]} to ${ends[1]}`;
    }
    case "redshiftAtFraction":
      return fields.fraction === null
        ? `${method}: redshift at a fraction`
        : `${method}: redshift at ${(fields.species ?? "neutral") === "neutral" ? "neutral" : "ionized"} fraction ${fields.fraction}`;
    case "duration":
      return fields.fractionFrom === null || fields.fractionTo === null
        ? `${method}: duration`
        : `${method}: duration from ${fields.fractionFrom} to ${fields.fractionTo}`;
    default:
      if (fields.zRole === "binAverage" && low !== null && high !== null) {
        return `${method}, z = ${low} to ${high}`;
      }
      if (z !== null) return `${method} at z = ${z}`;
      if (low !== null && high !== null) return `${method}, z = ${low} to ${high}`;
      return fields.quantity === null
        ? method
        : `${method}: ${QUANTITY_WORDS[fields.quantity].toLowerCase()}`;
  }
}

function methodTitle(tags: readonly string[]): string {
  const known = methodsOf(tags);
  if (known.length === 0) return "Constraint";
  if (known.length > 1 && familyOf(tags) === "other") return "Several methods";
  const first = tags.find((tag) => currentTag(tag) !== null);
  return tagName(first ?? "");
}
