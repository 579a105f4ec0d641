import { View } from "react-native";

import { LikelihoodCurve, type LikelihoodLine } from "@/charts/LikelihoodCurve";
import { Caption, Dense } from "@/components/Text";
import { FAMILY_MARKS } from "@/theme/families";
import { useTheme } from "@/theme/ThemeProvider";
import { type RowLikelihood, rowLikelihood } from "~shared/likelihood";
import { familyOf } from "~shared/methods/vocabulary";
import { type AsUsed, asUsed } from "~shared/statement/asUsed";
import type { ConstraintFields } from "~shared/statement/fields";

import { InformationLost } from "./InformationLost";

const POINTS = 161;

/** The likelihood a statement stands for by default, drawn, with its form in words. */
export function StatementCurve({
  fields,
  marks,
  others = [],
}: {
  fields: ConstraintFields;
  /** Values of model histories, drawn as lines. */
  marks?: readonly { x: number; label: string }[];
  /** Further curves to hold against it. */
  others?: readonly LikelihoodLine[];
}) {
  const { scheme } = useTheme();
  const used = asUsed(fields);
  if (used === null) return <Dense muted>No likelihood: nothing to fit.</Dense>;
  const row = rowLikelihood(used);
  if ("leftOut" in row) return <Dense muted>No likelihood yet: {row.leftOut}</Dense>;
  const family = familyOf(fields.methodTags);
  const quoted = quotedBeside(used);
  return (
    <View style={{ gap: 4 }}>
      <LikelihoodCurve
        lines={[
          { ...row.curve(POINTS), label: quoted ? "the curve" : "as used" },
          ...(quoted ? [{ ...quoted.curve(POINTS), label: "the quoted interval" }] : []),
          ...others,
        ]}
        hue={family ? FAMILY_MARKS[family][scheme] : undefined}
        marks={marks}
      />
      <Caption muted>{row.formula}</Caption>
      <InformationLost fields={fields} />
    </View>
  );
}

/** The interval quoted beside a curve by itself, in its default form. */
function quotedBeside({ curve, ...used }: AsUsed): RowLikelihood | null {
  if (used.kind !== "curve" || curve === undefined || used.value === null) return null;
  const row = rowLikelihood({ ...used, kind: "twoSided" });
  return "leftOut" in row ? null : row;
}
