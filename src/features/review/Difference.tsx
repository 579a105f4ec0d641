import { View } from "react-native";
import Svg, { Line } from "react-native-svg";

import { LikelihoodCurve, type LikelihoodLine } from "@/charts/LikelihoodCurve";
import { NotationText } from "@/components/NotationText";
import { StatementCurve } from "@/components/statement/StatementCurve";
import { Dense, Section } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { rowLikelihood } from "~shared/likelihood";
import { asUsed } from "~shared/statement/asUsed";
import { curveText } from "~shared/statement/curve";
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
  const shown = <NotCompared submission={submission} />;
  if (comparison.every(({ agrees }) => agrees)) return shown;
  const read = asRead(submission, comparison);
  const lines = [line(read, "your reading", "main"), line(submission, "submitted", "other")];
  // Curves of two quantities share no axis, and of a tabulated one the editor reads no rows.
  const comparable =
    submission.kind !== "curve" &&
    read.kind !== "curve" &&
    read.quantity === submission.quantity &&
    lines.every((one) => one !== null);
  return (
    <View style={{ gap: 12 }}>
      <Section>What the difference does</Section>
      {comparable ? (
        <LikelihoodCurve
          lines={lines as LikelihoodLine[]}
          legend={false}
          symbol={SYMBOLS[submission.quantity ?? "neutralFraction"]}
        />
      ) : null}
      <Side word="your reading" fields={read} look="main" />
      <Side word="submitted" fields={submission} look="other" />
      {shown}
    </View>
  );
}

/** What a reading can't compare: the curve between the facts read of it, and a statement in words. */
function NotCompared({ submission }: { submission: ConstraintFields }) {
  if (submission.kind === "curve") {
    return (
      <View style={{ gap: 12 }}>
        <Section>The submitted curve</Section>
        <Dense muted>
          {curveText(submission.curveTable, submission.curveColumn)}. Hold its shape against the
          paper’s figure.
        </Dense>
        <StatementCurve fields={submission} />
      </View>
    );
  }
  if (submission.kind === "qualitative" && submission.printedText) {
    return (
      <View style={{ gap: 12 }}>
        <Section>In words</Section>
        <Dense>{`“${submission.printedText}”`}</Dense>
        <Dense muted>
          Words are not compared. Look whether the paper says this, and no number.
        </Dense>
      </View>
    );
  }
  return null;
}

/** One of the two, with the line it has in the curve above. */
function Side({
  word,
  fields,
  look,
}: {
  word: string;
  fields: ConstraintFields;
  look: "main" | "other";
}) {
  const colors = useColors();
  const main = look === "main";
  return (
    <View style={{ flexDirection: "row", alignItems: "center", flexWrap: "wrap", gap: 8 }}>
      <Svg width={28} height={12} aria-hidden>
        <Line
          x1={0}
          y1={6}
          x2={28}
          y2={6}
          stroke={main ? colors.primary : colors.ember}
          strokeWidth={main ? 2.75 : 2}
          strokeDasharray={main ? undefined : "7 4"}
        />
      </Svg>
      <Dense>{word}</Dense>
      <NotationText notation={notationAsPrinted(fields)} size="readout" />
    </View>
  );
}
