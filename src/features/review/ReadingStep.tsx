import { useEffect } from "react";
import { View } from "react-native";

import Icon from "@/components/Icon";
import { CurveFactInput, CurveReading, type SetReading } from "@/components/statement/CurveReading";
import { FieldInput, focusField } from "@/components/statement/FieldInput";
import { PrintedEntry } from "@/components/statement/PrintedEntry";
import { Dense, Section } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { isCurveFact, type ReadingContent } from "~shared/review/reading";
import type { FieldName } from "~shared/statement/fields";

import { fieldName } from "./readingText";

/** The blind reading: nothing is filled in, and only what is asked for is shown. */
export function ReadingStep({
  fields,
  set,
  fieldsToRead,
  refusedField,
  refusal,
}: {
  fields: ReadingContent;
  set: SetReading;
  fieldsToRead: readonly string[];
  refusedField: string | null;
  refusal: string | null;
}) {
  const colors = useColors();
  // The whole statement, or only what changed since the last reading.
  const whole = fieldsToRead.includes("quantity");
  const error = (name: string) => (refusedField === name ? (refusal ?? undefined) : undefined);
  useEffect(() => {
    if (refusedField) focusField(refusedField as FieldName);
  }, [refusedField, refusal]);

  return (
    <View style={{ gap: 24 }}>
      <View
        style={{
          flexDirection: "row",
          gap: 12,
          padding: 16,
          borderRadius: 8,
          backgroundColor: colors.petrolTint,
        }}
      >
        <Icon name="eye-off-outline" color={colors.primary} />
        <Dense style={{ flex: 1, fontSize: 16, lineHeight: 24 }}>
          The submitted numbers stay hidden until your reading is stored. Type only what the paper
          prints.
        </Dense>
      </View>
      {whole ? (
        <PrintedEntry
          fields={fields}
          set={set}
          asked={(name) => fieldsToRead.includes(name)}
          error={error}
          curve={<CurveReading reading={fields} set={set} error={error} />}
        />
      ) : (
        <View style={{ gap: 16 }}>
          <Section>Read again</Section>
          <Dense>
            {fieldsToRead.length === 0
              ? "Nothing of the statement changed since it was last read. Store that to compare."
              : `This record was read before. Only what changed or differed is asked again: ${fieldsToRead.map(fieldName).join(", ")}.`}
          </Dense>
          {fieldsToRead.map((name) =>
            isCurveFact(name) ? (
              <CurveFactInput
                key={name}
                name={name}
                reading={fields}
                set={set}
                error={error(name)}
              />
            ) : (
              <FieldInput
                key={name}
                name={name as FieldName}
                fields={fields}
                set={set}
                error={error(name as FieldName)}
              />
            ),
          )}
        </View>
      )}
      {whole && fieldsToRead.includes("methodTags") ? (
        <FieldInput
          name="methodTags"
          fields={fields}
          set={set}
          label="Methods"
          error={error("methodTags")}
        />
      ) : null}
    </View>
  );
}
