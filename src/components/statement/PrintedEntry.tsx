import { type ReactNode, useState } from "react";
import { View } from "react-native";

import { Segments } from "@/components/Segments";
import { Block } from "@/components/Text";
import type { ConstraintFields, FieldName } from "~shared/statement/fields";

import { FieldInput, type SetField } from "./FieldInput";
import { isRelevant } from "./printedFields";

export interface PrintedEntryProps {
  fields: ConstraintFields;
  set: SetField;
  /** Which fields are asked at all; all of them when left out. */
  asked?: (name: FieldName) => boolean;
  error?: (name: FieldName) => string | undefined;
  /** Shown under a field: a comment of a return, say. */
  under?: (name: FieldName) => ReactNode;
  onBlur?: () => void;
}

/**
 * The entry of what a paper prints, in the order one reads it off the page. The submission form
 * and the second reading both use it, so that two people answer the same questions.
 */
export function PrintedEntry({ fields, set, asked, error, under, onBlur }: PrintedEntryProps) {
  const { quantity, kind } = fields;
  const fraction = quantity === "neutralFraction" || quantity === null;
  const limit = kind === "upperLimit" || kind === "lowerLimit";

  const shown = (name: FieldName) => (asked?.(name) ?? true) && isRelevant(name, fields);
  const input = (name: FieldName, label?: string, hint?: string) =>
    shown(name) ? (
      <View key={name} style={{ minWidth: 0, gap: 4 }}>
        <FieldInput
          name={name}
          fields={fields}
          set={set}
          label={label}
          hint={hint}
          error={error?.(name)}
          onBlur={onBlur}
        />
        {under?.(name)}
      </View>
    ) : null;
  const row = (...inputs: (ReactNode | null)[]) => {
    const present = inputs.filter((one) => one !== null);
    return present.length === 0 ? null : (
      <View style={{ flexDirection: "row", gap: 12, alignItems: "flex-start" }}>
        {present.map((one, index) => (
          <View key={index} style={{ flex: 1, minWidth: 0 }}>
            {one}
          </View>
        ))}
      </View>
    );
  };

  return (
    <View style={{ gap: 16 }}>
      {input("quantity", "Quantity")}
      {input("species", "Fraction as printed")}
      {input("helium")}
      {input("kind", "Statement")}
      {kind === "twoSided" && shown("value") ? (
        <View style={{ flexDirection: "row", gap: 12, alignItems: "center" }}>
          <View style={{ flex: 1, minWidth: 0 }}>{input("value", "Value")}</View>
          {shown("plus") || shown("minus") ? (
            <View style={{ flex: 1, minWidth: 0, gap: 8 }}>
              {row(input("plus", "+ plus"))}
              {row(input("minus", "− minus"))}
            </View>
          ) : null}
        </View>
      ) : (
        row(
          kind === "twoSided" ? input("plus", "+ plus") : null,
          kind === "twoSided" ? input("minus", "− minus") : null,
        )
      )}
      {limit ? <LimitEntry {...{ fields, set, input, row, shown }} /> : null}
      {kind === "band" ? row(input("bandLow", "Band from"), input("bandHigh", "Band to")) : null}
      {row(
        input("level", "Level"),
        input("levelPercent", "Level in percent"),
        input("estimator", "Estimator"),
      )}
      {row(input("rangeLow", "From redshift"), input("rangeHigh", "To redshift"))}
      {row(input("fraction", "At the fraction"))}
      {row(input("fractionFrom", "From fraction"), input("fractionTo", "To fraction"))}
      {input("durationUnit", "Unit of the duration")}
      {fraction ? row(input("z", "Redshift"), input("zLow", "low"), input("zHigh", "high")) : null}
      {input("zRole", "Role of the redshift")}
      {row(input("weighting", "Weighting"), input("scale", "Scale"))}
      {input("historyAssumed", "History and truncation assumed")}
      {input("printedText", "Exact printed text")}
      {input("furtherIntervals", "Further intervals of the same paper")}
    </View>
  );
}

type LimitForm = "one" | "base";

/** A limit is printed as one number, or as a base with a sigma of its own. */
function LimitEntry({
  fields,
  set,
  input,
  row,
  shown,
}: {
  fields: ConstraintFields;
  set: SetField;
  input: (name: FieldName, label?: string, hint?: string) => ReactNode;
  row: (...inputs: (ReactNode | null)[]) => ReactNode;
  shown: (name: FieldName) => boolean;
}) {
  const hasBase = fields.limitBase !== null || fields.limitSigma !== null;
  const [chosen, setForm] = useState<LimitForm>(hasBase ? "base" : "one");
  const form: LimitForm = hasBase ? "base" : fields.value !== null ? "one" : chosen;
  // The number typed first is the limit either way; a change of form keeps it.
  const change = (next: LimitForm) => {
    if (next === form) return;
    setForm(next);
    if (next === "base") {
      set("limitBase", fields.value);
      set("value", null);
    } else {
      set("value", fields.limitBase);
      set("limitBase", null);
      set("limitSigma", null);
    }
  };
  const both = shown("value") && shown("limitBase");
  if (!both)
    return row(
      input("value", "Limit"),
      input("limitBase", "Base"),
      input("limitSigma", "Own sigma"),
    );
  return (
    <View style={{ gap: 16 }}>
      <Segments
        label="The limit is printed as"
        value={form}
        options={[
          { value: "one", label: "One number" },
          { value: "base", label: "Base and its sigma" },
        ]}
        onChange={(value) => change(value as LimitForm)}
      />
      {form === "one"
        ? row(input("value", "Limit"))
        : row(input("limitBase", "Base"), input("limitSigma", "Own sigma"))}
    </View>
  );
}

/** Heads a group of inputs inside a step. */
export function EntryGroup({ title, children }: { title: string; children: ReactNode }) {
  return (
    <View role="group" aria-label={title} style={{ gap: 16 }}>
      <Block level={2}>{title}</Block>
      {children}
    </View>
  );
}
