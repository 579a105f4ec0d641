import { View } from "react-native";

import { Choice } from "@/components/Choice";
import { Field } from "@/components/Field";
import { Dense } from "@/components/Text";
import {
  CURVE_FACTS,
  type CurveFact,
  readingFieldName,
  type ReadingContent,
} from "~shared/review/reading";
import { CURVE_COLUMNS, type ConstraintFields } from "~shared/statement/fields";
import { CURVE_COLUMN_WORDS } from "~shared/statement/words";

import type { SetField } from "./setField";

export type SetReading = SetField & ((name: CurveFact, value: string | null) => void);

const HINTS: Partial<Record<CurveFact, string>> = {
  curveRows: "Without the line of column names.",
  curvePeak: "Where the density or ln L is highest.",
};

/** One fact of a curve, read off the paper's table. */
export function CurveFactInput({
  name,
  label,
  reading,
  set,
  error,
}: {
  name: CurveFact;
  label?: string;
  reading: ReadingContent;
  set: (name: CurveFact, value: string | null) => void;
  error?: string;
}) {
  return (
    <View nativeID={`field-${name}`}>
      <Field
        name={name}
        label={label ?? readingFieldName(name)}
        numeric
        value={reading[name] ?? ""}
        hint={HINTS[name]}
        error={error}
        onChangeText={(text) => set(name, text === "" ? null : text)}
      />
    </View>
  );
}

/** What an editor reads of a curve in place of its rows. */
export function CurveReading({
  reading,
  set,
  error,
}: {
  reading: ReadingContent;
  set: SetReading;
  error: (name: string) => string | undefined;
}) {
  return (
    <View style={{ gap: 16 }}>
      <Dense muted>
        The rows are not typed again. Find the table the paper gives, and read these of it.
      </Dense>
      <Choice
        label="The second column holds"
        placeholder="Choose"
        value={reading.curveColumn}
        options={CURVE_COLUMNS.map((value) => ({ value, label: CURVE_COLUMN_WORDS[value] }))}
        error={error("curveColumn")}
        onChange={(value) => set("curveColumn", value as ConstraintFields["curveColumn"])}
      />
      {CURVE_FACTS.map((name) => (
        <CurveFactInput key={name} name={name} reading={reading} set={set} error={error(name)} />
      ))}
    </View>
  );
}
