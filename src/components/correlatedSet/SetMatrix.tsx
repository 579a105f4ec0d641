import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { HeatMap, HeatScale } from "@/charts/HeatMap";
import { Segments } from "@/components/Segments";
import { Caption, Dense } from "@/components/Text";
import { space } from "@/theme/tokens";
import type { CorrelatedSetPartsFragment } from "~graphql/generated/graphql";
import { entryAt } from "~shared/correlatedSet/content";
import { memberWords } from "~shared/correlatedSet/members";

import { plainFields } from "../statement/plainFields";

type Member = CorrelatedSetPartsFragment["members"][number];

/** "z 6.6" of a record, or its number alone where its content is not open. */
export function memberLabel({ number, fields }: Member): string {
  return fields ? memberWords(plainFields(fields)) : number;
}

/** The matrix of a set: as printed, and as used where that differs. */
export function SetMatrix({ set }: { set: CorrelatedSetPartsFragment }) {
  const [asUsed, setAsUsed] = useState(false);
  const { members, printedRho, usedRho, matrixKind, triangle } = set;
  if (!printedRho) return <Dense muted>The matrix is not complete yet.</Dense>;
  const turned =
    usedRho !== null &&
    usedRho !== undefined &&
    usedRho.some((row, i) => row.some((rho, j) => rho !== printedRho[i]?.[j]));
  const other = turned || matrixKind === "covariance";
  const used = asUsed && usedRho ? usedRho : null;
  const texts = members.map((_row, i) =>
    members.map((_column, j) =>
      used ? (i === j ? "1" : (used[i]?.[j] ?? 0).toFixed(2)) : entryAt(triangle, i, j),
    ),
  );
  return (
    <View style={styles.all}>
      {other && usedRho ? (
        <Segments
          label="Which matrix"
          value={asUsed ? "used" : "printed"}
          options={[
            {
              value: "printed",
              label: matrixKind === "covariance" ? "Covariance as printed" : "As printed",
            },
            { value: "used", label: "Correlation as used" },
          ]}
          onChange={(value) => setAsUsed(value === "used")}
        />
      ) : null}
      <HeatMap
        caption={`${used ? "Correlation matrix as used" : matrixKind === "covariance" ? "Covariance matrix as printed" : "Correlation matrix as printed"} of ${set.label ?? set.number}`}
        labels={members.map((member, at) => ({
          short: String(at + 1),
          words: `${member.number}, ${memberLabel(member)}`,
        }))}
        rho={used ?? printedRho}
        texts={texts}
      />
      <View style={styles.scale}>
        <Caption>Tint: correlation</Caption>
        <HeatScale />
      </View>
      {turned ? (
        <Caption>
          As used, x = 1 − Q turns ionized fractions round: where it turns one of two records, their
          correlation changes its sign; where it turns both, it stays.
        </Caption>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.s },
  scale: { flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: space.xs },
});
