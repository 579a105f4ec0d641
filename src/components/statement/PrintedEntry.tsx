import { Fragment, type ReactNode, useState } from "react";
import { View } from "react-native";

import { Segments } from "@/components/Segments";
import { Block, Dense } from "@/components/Text";
import { useLayoutClass } from "@/layout/useLayoutClass";
import type { ConstraintFields, FieldName } from "~shared/statement/fields";

import { CurveEntry } from "./CurveEntry";
import { fieldAnchor, FieldInput, type SetField } from "./FieldInput";
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
  /** Asked of a tabulated curve in place of its rows; the second reading does. */
  curve?: ReactNode;
}

/**
 * The entry of what a paper prints, in the order one reads it off the page. The submission form
 * and the second reading both use it, so that two people answer the same questions.
 */
export function PrintedEntry({
  fields,
  set,
  asked,
  error,
  under,
  onBlur,
  curve,
}: PrintedEntryProps) {
  const { kind } = fields;
  const limit = kind === "upperLimit" || kind === "lowerLimit";
  const interval = kind === "twoSided" || kind === "curve";
  const depth = fields.quantity === "opticalDepth" || fields.quantity === "opticalDepthRange";

  // Half a phone is too narrow for "One sigma (68.27 %)".
  const phone = useLayoutClass() === "compact";
  const shown = (name: FieldName) => (asked?.(name) ?? true) && isRelevant(name, fields);
  const control = (name: FieldName, label?: string) => (
    <FieldInput
      name={name}
      fields={fields}
      set={set}
      label={label}
      error={error?.(name)}
      onBlur={onBlur}
    />
  );
  const row: Row = (...inputs) => {
    const present = inputs.filter(([name]) => shown(name));
    if (present.length === 0) return null;
    return (
      <View style={{ gap: 4 }}>
        <View style={{ flexDirection: "row", gap: 12, alignItems: "flex-start" }}>
          {present.map(([name, label]) => (
            <View key={name} style={{ flex: 1, minWidth: 0 }}>
              {control(name, label)}
            </View>
          ))}
        </View>
        {/* What belongs to one field of a row takes the row's width: it is text to be read. */}
        {present.map(([name]) => (
          <Fragment key={name}>{under?.(name)}</Fragment>
        ))}
      </View>
    );
  };

  return (
    <View style={{ gap: 16 }}>
      {row(["quantity", "Quantity"])}
      {row(["species", "Fraction as printed"])}
      {row(["helium"])}
      {row(["kind", "Statement"])}
      {kind === "curve" ? (
        <>
          {curve ?? (
            <View nativeID={fieldAnchor("curveTable")} style={{ gap: 4 }}>
              <CurveEntry
                fields={fields}
                set={set}
                error={error?.("curveTable")}
                columnError={error?.("curveColumn")}
                onBlur={onBlur}
              />
              {under?.("curveTable")}
              {under?.("curveColumn")}
            </View>
          )}
          <Dense>
            The interval that the paper quotes of it, if it does. The curve is what is used; the
            interval is held against it.
          </Dense>
        </>
      ) : null}
      {interval && shown("value") && (shown("plus") || shown("minus")) ? (
        <View style={{ gap: 4 }}>
          <View style={{ flexDirection: "row", gap: 12, alignItems: "center" }}>
            <View style={{ flex: 1, minWidth: 0 }}>{control("value", "Value")}</View>
            <View style={{ flex: 1, minWidth: 0, gap: 8 }}>
              {shown("plus") ? control("plus", "+ plus") : null}
              {shown("minus") ? control("minus", "− minus") : null}
            </View>
          </View>
          {under?.("value")}
          {under?.("plus")}
          {under?.("minus")}
        </View>
      ) : interval ? (
        row(["value", "Value"], ["plus", "+ plus"], ["minus", "− minus"])
      ) : null}
      {limit ? <LimitEntry fields={fields} set={set} row={row} shown={shown} /> : null}
      {row(["bandLow", "Band from"], ["bandHigh", "Band to"])}
      {phone ? (
        <>
          {row(["level", "Level"], ["levelPercent", "Level in percent"])}
          {row(["estimator", "Estimator"])}
        </>
      ) : (
        row(["level", "Level"], ["levelPercent", "Level in percent"], ["estimator", "Estimator"])
      )}
      {row(["rangeLow", "From redshift"], ["rangeHigh", "To redshift"])}
      {row(["fraction", "At the fraction"])}
      {row(["fractionFrom", "From fraction"], ["fractionTo", "To fraction"])}
      {row(["durationUnit", "Unit of the duration"])}
      {row(["z", "Redshift"], ["zLow", "low"], ["zHigh", "high"])}
      {row(["zRole", "Role of the redshift"])}
      {row(["weighting", "Weighting"], ["scale", "Scale"])}
      {row(["historyAssumed", depth ? "History family assumed" : "History assumed"])}
      {row(["heliumAssumed", "Helium, as the paper treats it"])}
      {row(["truncationAssumed", "Where history or integral is cut off"])}
      {row(["printedText", "Exact printed text"])}
      {row(["furtherIntervals", "Further intervals of the same paper"])}
    </View>
  );
}

/** Inputs side by side, those of them that are asked; null when none is. */
type Row = (...inputs: [name: FieldName, label?: string][]) => ReactNode;

type LimitForm = "one" | "base";

/** A limit is printed as one number, or as a base with a sigma of its own. */
function LimitEntry({
  fields,
  set,
  row,
  shown,
}: {
  fields: ConstraintFields;
  set: SetField;
  row: Row;
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
  if (!both) return row(["value", "Limit"], ["limitBase", "Base"], ["limitSigma", "Own sigma"]);
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
        ? row(["value", "Limit"])
        : row(["limitBase", "Base"], ["limitSigma", "Own sigma"])}
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
