import { View } from "react-native";

import { LikelihoodCurve, type LikelihoodLine } from "@/charts/LikelihoodCurve";
import { Caption, Dense } from "@/components/Text";
import { FAMILY_MARKS } from "@/theme/families";
import { useTheme } from "@/theme/ThemeProvider";
import { rowLikelihood } from "~shared/likelihood";
import { familyOf } from "~shared/methods/vocabulary";
import { asUsed } from "~shared/statement/asUsed";
import type { ConstraintFields } from "~shared/statement/fields";

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
  return (
    <View style={{ gap: 4 }}>
      <LikelihoodCurve
        lines={[{ ...row.curve(POINTS), label: "as used" }, ...others]}
        hue={family ? FAMILY_MARKS[family][scheme] : undefined}
        marks={marks}
      />
      <Caption muted>{row.formula}</Caption>
    </View>
  );
}
