import { View } from "react-native";

import { Marker } from "@/components/Marker";
import { Section } from "@/components/Text";
import { space } from "@/theme/tokens";
import type { MethodVocabularyQuery } from "~graphql/generated/graphql";
import { FAMILY_NAMES, METHOD_FAMILIES, type MethodFamily } from "~shared/methods/vocabulary";

export type KeptMethod = MethodVocabularyQuery["methodVocabulary"][number];

/** Methods in use, by family; families without one are left out. */
export function byFamily(
  methods: readonly KeptMethod[],
): { family: MethodFamily; members: KeptMethod[] }[] {
  return METHOD_FAMILIES.map((family) => ({
    family,
    members: methods.filter((one) => one.family === family && one.retiredInto === null),
  })).filter(({ members }) => members.length > 0);
}

export function constraintWords(count: number): string {
  return count === 1 ? "1 constraint" : `${count} constraints`;
}

/** A family's name behind its marker. */
export function FamilyHead({ family }: { family: MethodFamily }) {
  return (
    <View style={{ flexDirection: "row", alignItems: "center", gap: space.xs }}>
      <Marker family={family} size={16} />
      <Section>{FAMILY_NAMES[family]}</Section>
    </View>
  );
}
