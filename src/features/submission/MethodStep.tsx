import type { ReactNode } from "react";
import { View } from "react-native";

import { FieldInput, type SetField } from "@/components/statement/FieldInput";
import { EntryGroup } from "@/components/statement/PrintedEntry";
import { isRelevant } from "@/components/statement/printedFields";
import type { ConstraintFields, FieldName } from "~shared/statement/fields";

/** Where the statement comes from: method, data, dependence, groups, provenance. */
export function MethodStep({
  fields,
  set,
  error,
  under,
  onBlur,
}: {
  fields: ConstraintFields;
  set: SetField;
  error: (name: FieldName) => string | undefined;
  under: (name: FieldName) => ReactNode;
  onBlur: () => void;
}) {
  const input = (name: FieldName, label?: string, hint?: string) =>
    isRelevant(name, fields) ? (
      <View key={name} style={{ minWidth: 0, gap: 4 }}>
        <FieldInput
          name={name}
          fields={fields}
          set={set}
          label={label}
          hint={hint}
          error={error(name) ?? (name === "dataUsed" ? error("dataKnown") : undefined)}
          onBlur={onBlur}
        />
        {under(name)}
      </View>
    ) : null;
  const row = (...inputs: ReactNode[]) => (
    <View style={{ flexDirection: "row", gap: 12, alignItems: "flex-start" }}>
      {inputs
        .filter((one) => one !== null)
        .map((one, index) => (
          <View key={index} style={{ flex: 1, minWidth: 0 }}>
            {one}
          </View>
        ))}
    </View>
  );
  return (
    <View style={{ gap: 32 }}>
      <EntryGroup title="Method">{input("methodTags", "Methods")}</EntryGroup>
      <EntryGroup title="Data used">
        {input("dataUsed", "Sightlines, fields and samples")}
      </EntryGroup>
      <EntryGroup title="Place in the paper">
        {row(input("place", "Table, row or section"), input("page", "Page"))}
        {row(
          input("versionRead", "Version read"),
          input("preprintVersion", "Preprint version", "2, for v2"),
        )}
        {input("readOffFigure", "Read off a figure")}
        {input("digitizingError", "Digitizing error")}
      </EntryGroup>
      <EntryGroup title="What it depends on">
        {input("conditionedOn")}
        {input("priorForm", "Form of the prior")}
        {row(input("priorVariable", "Prior is on"), input("priorRange", "Range"))}
        {input("modelTags")}
        {input("cosmicVariance")}
      </EntryGroup>
      <EntryGroup title="Alternatives">
        {input(
          "alternativesGroup",
          "Group",
          "Answers of this paper to one question carry the same label; they are never multiplied.",
        )}
        {fields.alternativesGroup
          ? input("alternativesPreferred", "The authors prefer this one")
          : null}
      </EntryGroup>
      <EntryGroup title="Remark">{input("remark")}</EntryGroup>
    </View>
  );
}
