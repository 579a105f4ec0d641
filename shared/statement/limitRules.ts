/** Rules about limits, bands and levels. */
import { asUsed } from "./asUsed";
import type { AsUsed } from "./asUsed";
import { parseDecimal } from "./decimal";
import { error, mustAnswer, note } from "./finding";
import type { Finding } from "./finding";
import type { ConstraintFields } from "./fields";
import { levelProbability } from "./level";
import { printedLevels } from "./printedText";
import { isLimit, isOpen, relevantFields } from "./relevant";
import { typed } from "./ruleText";
import { LEVEL_WORDS } from "./words";

/** A limit in two forms or one that says nothing; a band that is a limit. */
export function limits(fields: ConstraintFields): Finding[] {
  const found: Finding[] = [];
  if (!isLimit(fields.kind)) {
    return fields.kind === "band" ? bandEdges(fields) : found;
  }
  if (!isOpen(fields, "value") && !isOpen(fields, "limitBase")) {
    found.push(
      error(
        "twoLimits",
        ["value", "limitBase"],
        `The limit has a value (${typed(fields.value)}) and a base with its own sigma (${typed(fields.limitBase)}). Keep the form the paper prints and clear the other.`,
      ),
    );
  }
  const used = asUsed(fields);
  if (used && used.quantity === "neutralFraction" && used.evaluatedIn === "linear") {
    const empty = emptyLimit(used);
    if (empty !== null) {
      found.push(
        mustAnswer(
          "flatLimit",
          [used.value === null ? "limitBase" : "value", "level"],
          `${empty} Look at the number and the level again, or say why the record is worth keeping.`,
        ),
      );
    }
  }
  return found;
}

/** Why a limit carries nothing, or null when it does. A flat prior on [0, 1] already excludes 1 − L above, L below. */
function emptyLimit(used: AsUsed): string | null {
  const upper = used.kind === "upperLimit";
  if (used.limitBase !== null) {
    const nothing = upper ? Number(used.limitBase) >= 1 : Number(used.limitBase) <= 0;
    return nothing ? "The base allows every neutral fraction: the limit says nothing." : null;
  }
  if (used.value === null || used.level === null) return null;
  const value = Number(used.value);
  // Twelve digits keep 1 − 0.95 from missing 0.05 by a binary rounding.
  const edge = Number((upper ? used.level : 1 - used.level).toPrecision(12));
  if (upper ? value < edge : value > edge) return null;
  const level = `${Number((used.level * 100).toPrecision(6))} %`;
  return `As a neutral fraction the limit is ${upper ? "below" : "above"} ${used.value} at ${level}; a flat prior alone says as much, so it carries nothing.`;
}

function bandEdges(fields: ConstraintFields): Finding[] {
  if (fields.quantity !== "neutralFraction" || fields.scale !== "linear") return [];
  const low = parseDecimal(fields.bandLow);
  const high = parseDecimal(fields.bandHigh);
  if (!low || !high || !(low.eq(0) || high.eq(1))) return [];
  return [
    note(
      "bandTouchesEdge",
      ["bandLow", "bandHigh"],
      `The band touches ${low.eq(0) ? "0" : "1"}. If the paper means a bound on one side only, enter a limit.`,
    ),
  ];
}

/** A level that can't be, or unlike the printed one. */
export function levels(fields: ConstraintFields): Finding[] {
  const found: Finding[] = [];
  if (!relevantFields(fields).includes("level")) return found;
  if (fields.level === "other") {
    const percent = parseDecimal(fields.levelPercent);
    if (percent && (percent.lte(0) || percent.gte(100))) {
      found.push(
        error(
          "outsideRange.levelPercent",
          ["levelPercent"],
          `A level of ${typed(fields.levelPercent)} % can't be: it lies between 0 and 100.`,
        ),
      );
    } else if (percent?.lte(1)) {
      found.push(
        mustAnswer(
          "smallLevel",
          ["levelPercent"],
          `The level reads ${typed(fields.levelPercent)} %. Was ${percent.times(100).toFixed()} % meant?`,
        ),
      );
    }
  }
  const text = fields.printedText ?? "";
  const named = printedLevels(text);
  if (fields.level === null || named.length === 0) return found;
  const entered = levelProbability(fields.level, fields.levelPercent);
  if (fields.level !== "notStated" && entered === null) return found;
  // 68.3 % and 68.27 % are one level; 68 % and one sigma are two.
  const same = named.some(
    (level) => entered !== null && Math.abs(level.probability - entered) < 0.0006,
  );
  if (!same) {
    const words = [...new Set(named.map((level) => level.words.trim()))].join(", ");
    const chosen =
      fields.level === "other"
        ? `${typed(fields.levelPercent)} %`
        : LEVEL_WORDS[fields.level].toLowerCase();
    found.push(
      mustAnswer(
        "levelUnlikePrinted",
        ["level", "printedText"],
        `The printed text says ${words}; the level entered is ${chosen}. Choose the level as printed, or say why it differs.`,
      ),
    );
  }
  return found;
}
