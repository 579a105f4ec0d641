import { View } from "react-native";

import { LikelihoodCurve, type LikelihoodLine } from "@/charts/LikelihoodCurve";
import { NotationText } from "@/components/NotationText";
import { Dense, Section } from "@/components/Text";
import { rowLikelihood } from "~shared/likelihood";
import { asUsed } from "~shared/statement/asUsed";
import type { ConstraintFields, Quantity } from "~shared/statement/fields";
import { notationAsPrinted } from "~shared/statement/notation";

import { asRead } from "./readingText";

const POINTS = 161;

const SYMBOLS: Record<Quantity, string> = {
  neutralFraction: "x_HI",
  opticalDepth: "τ",
  opticalDepthRange: "τ",
  redshiftAtFraction: "z",
  duration: "Δz",
};

function line(
  fields: ConstraintFields,
  label: string,
  look: "main" | "other",
): LikelihoodLine | null {
  const used = asUsed(fields);
  if (used === null) return null;
  const row = rowLikelihood(used);
  return "leftOut" in row ? null : { ...row.curve(POINTS), label, look };
}

/** The two statements and what each would tell a fit, so that the size of a slip is seen. */
export function Difference({
  submission,
  comparison,
}: {
  submission: ConstraintFields;
  comparison: readonly { field: string; reading?: string | null; agrees: boolean }[];
}) {
  if (comparison.every(({ agrees }) => agrees)) return null;
  const read = asRead(submission, comparison);
  const lines = [line(read, "your reading", "main"), line(submission, "submitted", "other")];
  // Curves of two quantities share no axis.
  const comparable = read.quantity === submission.quantity && lines.every((one) => one !== null);
  return (
    <View style={{ gap: 12 }}>
      <Section>What the difference does</Section>
      {comparable ? (
        <LikelihoodCurve
          lines={lines as LikelihoodLine[]}
          symbol={SYMBOLS[submission.quantity ?? "neutralFraction"]}
        />
      ) : null}
      <Side word="your reading" fields={read} />
      <Side word="submitted" fields={submission} />
    </View>
  );
}

function Side({ word, fields }: { word: string; fields: ConstraintFields }) {
  return (
    <View style={{ flexDirection: "row", alignItems: "center", flexWrap: "wrap", gap: 8 }}>
      <Dense>{word}</Dense>
      <NotationText notation={notationAsPrinted(fields)} size="readout" />
    </View>
  );
}
