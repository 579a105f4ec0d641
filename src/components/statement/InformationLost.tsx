import { Caption } from "@/components/Text";
import { rowLikelihood } from "~shared/likelihood";
import { asUsed } from "~shared/statement/asUsed";
import type { ConstraintFields } from "~shared/statement/fields";

/** What the interval quoted beside a curve leaves out of it, in nats; nothing where none is quoted. */
export function InformationLost({ fields }: { fields: ConstraintFields }) {
  const words = informationLostWords(fields);
  return words === null ? null : <Caption>{words}</Caption>;
}

/** The sentence, or null for a record without a curve or without quoted numbers. */
export function informationLostWords(fields: ConstraintFields): string | null {
  if (fields.kind !== "curve") return null;
  const row = rowLikelihood(asUsed(fields));
  const lost = "leftOut" in row ? null : row.informationLost();
  if (lost === null) return null;
  if (lost === Infinity) {
    return "The quoted interval alone would exclude values that the curve allows.";
  }
  const amount = lost < 0.005 ? "less than 0.01" : lost.toFixed(2);
  return `The quoted interval alone would lose ${amount} nats of the curve: the Kullback-Leibler divergence from the curve to it.`;
}
