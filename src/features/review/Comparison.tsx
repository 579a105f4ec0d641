import { useState } from "react";
import { View } from "react-native";

import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Field } from "@/components/Field";
import Icon from "@/components/Icon";
import { CurveFactInput } from "@/components/statement/CurveReading";
import { FieldInput } from "@/components/statement/FieldInput";
import { Caption, Dense, Label, Mono, Section } from "@/components/Text";
import { useLayoutClass } from "@/layout/useLayoutClass";
import { useColors } from "@/theme/ThemeProvider";
import type { ReviewPartsFragment } from "~graphql/generated/graphql";
import { isCurveFact, type ReadingContent } from "~shared/review/reading";
import { emptyFields, type FieldName } from "~shared/statement/fields";

import { fieldName, isNumber } from "./readingText";

type Row = ReviewPartsFragment["comparison"][number];

export interface ComparisonProps {
  rows: readonly Row[];
  busy: boolean;
  /** Whether the editor still holds the claim; a closed comparison is only read. */
  open: boolean;
  onCorrect: (field: FieldName, reading: ReadingContent, why: string) => Promise<boolean>;
  onReturnAt: (row: Row) => void;
}

/** Reading and submission, row by row. A differing row carries its two ways out. */
export function Comparison(props: ComparisonProps) {
  const { rows } = props;
  const wide = useLayoutClass() !== "compact";
  const differing = rows.filter(({ agrees }) => !agrees).length;
  const summary =
    differing === 0
      ? `${rows.length} fields, all the same`
      : `${rows.length - differing} same, ${differing} ${differing === 1 ? "differs" : "differ"}`;
  return (
    <Card flush>
      <View
        style={{
          flexDirection: "row",
          flexWrap: "wrap",
          justifyContent: "space-between",
          alignItems: "baseline",
          gap: 8,
          padding: 16,
        }}
      >
        <Section>Compare</Section>
        <Dense muted>{summary}</Dense>
      </View>
      <View role="table" aria-label="Your reading beside the submission">
        <View
          role="row"
          style={{ flexDirection: "row", gap: 12, paddingHorizontal: 16, paddingBottom: 8 }}
        >
          {wide ? <Head flex={1.2}>Field</Head> : null}
          <Head>Your reading</Head>
          <Head>Submitted</Head>
          {wide ? (
            <Head flex={0.6} hidden>
              Same or different
            </Head>
          ) : null}
        </View>
        {rows.map((row) => (
          <ComparedRow key={row.field} row={row} wide={wide} {...props} />
        ))}
      </View>
    </Card>
  );
}

function Head({
  children,
  flex = 1,
  hidden = false,
}: {
  children: string;
  flex?: number;
  hidden?: boolean;
}) {
  return (
    <View role="columnheader" style={{ flex }}>
      <Caption style={hidden ? { opacity: 0 } : undefined}>{children}</Caption>
    </View>
  );
}

function ComparedRow({
  row,
  wide,
  busy,
  open,
  onCorrect,
  onReturnAt,
}: ComparisonProps & { row: Row; wide: boolean }) {
  const colors = useColors();
  const [reading, setReading] = useState(false);
  const { field, agrees } = row;
  const name = (
    <Label style={agrees ? { fontWeight: "400", color: colors.muted } : { fontWeight: "600" }}>
      {fieldName(field)}
    </Label>
  );
  const state = (
    <View style={{ flexDirection: "row", alignItems: "center", gap: 6 }}>
      <Icon
        name={agrees ? "check" : "not-equal-variant"}
        size={20}
        color={agrees ? colors.primary : colors.emberText}
      />
      <Label
        style={{
          fontWeight: agrees ? "400" : "600",
          color: agrees ? colors.muted : colors.emberText,
        }}
      >
        {agrees ? "same" : "differs"}
      </Label>
    </View>
  );
  return (
    <View
      style={{
        borderTopWidth: 1,
        borderColor: colors.hairline,
        paddingHorizontal: 16,
        paddingVertical: 12,
        gap: 12,
        backgroundColor: agrees ? undefined : colors.emberTint,
      }}
    >
      <View
        role="row"
        style={{ flexDirection: "row", flexWrap: "wrap", gap: 12, alignItems: "center" }}
      >
        <View
          role="rowheader"
          style={
            wide
              ? { flex: 1.2 }
              : { width: "100%", flexDirection: "row", justifyContent: "space-between" }
          }
        >
          {name}
          {wide ? null : state}
        </View>
        <View role="cell" style={{ flex: 1, minWidth: 0 }}>
          <Value field={field} text={row.reading} />
          {row.earlier.map((text, index) => (
            <Caption key={index}>{`read first as ${text}`}</Caption>
          ))}
        </View>
        <View role="cell" style={{ flex: 1, minWidth: 0 }}>
          <Value field={field} text={row.submitted} />
        </View>
        {wide ? (
          <View role="cell" style={{ flex: 0.6 }}>
            {state}
          </View>
        ) : null}
      </View>
      {!agrees && open ? (
        <View role="row">
          <View role="cell" style={{ gap: 12 }}>
            <Dense>One side must change, and the change goes on record.</Dense>
            {reading ? (
              <ReadAgain
                field={field as FieldName}
                busy={busy}
                onCancel={() => setReading(false)}
                onStore={async (fields, why) => {
                  if (await onCorrect(field as FieldName, fields, why)) setReading(false);
                }}
              />
            ) : (
              <View style={{ flexDirection: "row", flexWrap: "wrap", gap: 8 }}>
                <Button
                  kind="outline"
                  icon="eye-refresh-outline"
                  label="Read this field again"
                  accessibilityLabel={`Read this field again: ${fieldName(field)}`}
                  onPress={() => setReading(true)}
                />
                <Button
                  kind="return"
                  icon="keyboard-return"
                  label="Return with a comment"
                  accessibilityLabel={`Return with a comment at ${fieldName(field)}`}
                  onPress={() => onReturnAt(row)}
                />
              </View>
            )}
          </View>
        </View>
      ) : null}
    </View>
  );
}

function Value({ field, text }: { field: string; text?: string | null }) {
  if (!text) return <Dense muted>open</Dense>;
  return isNumber(field) ? (
    <Mono style={{ fontSize: 18, lineHeight: 24 }}>{text}</Mono>
  ) : (
    <Dense style={{ fontSize: 16, lineHeight: 24 }}>{text}</Dense>
  );
}

/** One field read once more, empty again, with the reason that goes on record. */
function ReadAgain({
  field,
  busy,
  onStore,
  onCancel,
}: {
  field: FieldName;
  busy: boolean;
  onStore: (fields: ReadingContent, why: string) => void;
  onCancel: () => void;
}) {
  const [fields, setFields] = useState<ReadingContent>(emptyFields);
  const [why, setWhy] = useState("");
  return (
    <View style={{ gap: 12, maxWidth: 520 }}>
      {isCurveFact(field) ? (
        <CurveFactInput
          name={field}
          reading={fields}
          label={`${fieldName(field)}, read again`}
          set={(name, value) => setFields((before) => ({ ...before, [name]: value }))}
        />
      ) : (
        <FieldInput
          name={field}
          fields={fields}
          label={`${fieldName(field)}, read again`}
          set={(name, value) => setFields((before) => ({ ...before, [name]: value }))}
        />
      )}
      <Field
        label="Why you read it differently now"
        value={why}
        onChangeText={setWhy}
        hint="Both readings stay on record."
      />
      <View style={{ flexDirection: "row", flexWrap: "wrap", gap: 8 }}>
        <Button
          kind="tonal"
          label="Store the correction"
          busy={busy}
          disabledBecause={why.trim() === "" ? "Say why first." : undefined}
          onPress={() => onStore(fields, why)}
        />
        <Button kind="text" label="Cancel" onPress={onCancel} />
      </View>
    </View>
  );
}
