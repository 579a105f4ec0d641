import { View } from "react-native";

import { NotationText } from "@/components/NotationText";
import { Dense, Section } from "@/components/Text";
import type { ConstraintFields } from "~shared/statement/fields";
import { notationAsPrinted } from "~shared/statement/notation";

import { asRead } from "./readingText";

/** The two statements, so that the size of a slip is seen. */
export function Difference({
  submission,
  comparison,
}: {
  submission: ConstraintFields;
  comparison: readonly { field: string; reading?: string | null; agrees: boolean }[];
}) {
  if (comparison.every(({ agrees }) => agrees)) return null;
  return (
    <View style={{ gap: 12 }}>
      <Section>What the difference does</Section>
      <View style={{ flexDirection: "row", alignItems: "center", flexWrap: "wrap", gap: 8 }}>
        <Dense>your reading</Dense>
        <NotationText notation={notationAsPrinted(asRead(submission, comparison))} size="readout" />
      </View>
      <View style={{ flexDirection: "row", alignItems: "center", flexWrap: "wrap", gap: 8 }}>
        <Dense>submitted</Dense>
        <NotationText notation={notationAsPrinted(submission)} size="readout" />
      </View>
    </View>
  );
}
