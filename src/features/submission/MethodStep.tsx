import { Fragment, type ReactNode } from "react";
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
  const row = (...inputs: [name: FieldName, label?: string, hint?: string][]) => {
    const present = inputs.filter(([name]) => isRelevant(name, fields));
    if (present.length === 0) return null;
    return (
      <View style={{ gap: 4 }}>
        <View
          style={{
            flexDirection: "row",
            flexWrap: "wrap",
            columnGap: 12,
            alignItems: "flex-start",
          }}
        >
          {present.map(([name, label, hint]) => (
            // Two of them stand side by side from a common phone on, one below the other before.
            <View key={name} style={{ flexGrow: 1, flexShrink: 1, flexBasis: 160, minWidth: 0 }}>
              <FieldInput
                name={name}
                fields={fields}
                set={set}
                label={label}
                hint={hint}
                error={error(name) ?? (name === "dataUsed" ? error("dataKnown") : undefined)}
                onBlur={onBlur}
              />
            </View>
          ))}
        </View>
        {present.map(([name]) => (
          <Fragment key={name}>{under(name)}</Fragment>
        ))}
      </View>
    );
  };
  return (
    <View style={{ gap: 32 }}>
      <EntryGroup title="Method">{row(["methodTags", "Methods"])}</EntryGroup>
      <EntryGroup title="Data used">
        {row(["dataUsed", "Sightlines, fields and samples"])}
      </EntryGroup>
      <EntryGroup title="Place in the paper">
        {row(["place", "Table, row or section"], ["page", "Page"])}
        {row(
          ["versionRead", "Version read"],
          ["preprintVersion", "Preprint version", "A 2 for v2"],
        )}
        {row(["readOffFigure", "Read off a figure"])}
        {row(["digitizingError", "Digitizing error"])}
      </EntryGroup>
      <EntryGroup title="What it depends on">
        {row(["conditionedOn"])}
        {row(["priorForm", "Form of the prior"])}
        {row(["priorVariable", "Prior is on"], ["priorRange", "Range"])}
        {row(["modelTags"])}
        {row(["cosmicVariance"])}
      </EntryGroup>
      <EntryGroup title="Relation to other records">
        {row(["supersedes", undefined, "Once this is approved, they are marked as superseded."])}
        {row(["erratumOf", undefined, "Once this is approved, they are marked as superseded."])}
        {row(["reanalysisOf"])}
        {row(["subsetOf"])}
      </EntryGroup>
      <EntryGroup title="Alternatives">
        {row([
          "alternativesGroup",
          "Group",
          "Answers of this paper to one question carry the same label; they are never multiplied.",
        ])}
        {fields.alternativesGroup
          ? row(["alternativesPreferred", "The authors prefer this one"])
          : null}
      </EntryGroup>
      <EntryGroup title="Remark">{row(["remark"])}</EntryGroup>
    </View>
  );
}
