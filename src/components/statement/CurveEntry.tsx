import { useState } from "react";
import { View } from "react-native";

import { LikelihoodCurve } from "@/charts/LikelihoodCurve";
import { Button } from "@/components/Button";
import { Choice } from "@/components/Choice";
import { Field } from "@/components/Field";
import { FilePick } from "@/components/FilePick";
import Icon from "@/components/Icon";
import { Caption, Dense } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import {
  CURVE_FEWEST_ROWS,
  CURVE_LONGEST,
  CURVE_MOST_ROWS,
  curveAsPrinted,
  curveText,
  parseCurve,
} from "~shared/statement/curve";
import { CURVE_COLUMNS, type ConstraintFields } from "~shared/statement/fields";
import { lineText, notationAsPrinted } from "~shared/statement/notation";
import { CURVE_COLUMN_WORDS, withTrueMinus } from "~shared/statement/words";

import type { SetField } from "./setField";

/** Problems of lines that are listed; the rest is counted. */
const MOST_SAID = 5;

/** The entry of a tabulated curve: a file or pasted rows, what the second column holds, and what was read. */
export function CurveEntry({
  fields,
  set,
  error,
  columnError,
  onBlur,
}: {
  fields: ConstraintFields;
  set: SetField;
  error?: string;
  columnError?: string;
  onBlur?: () => void;
}) {
  const [tooLong, setTooLong] = useState<string | null>(null);
  const { curveTable, curveColumn } = fields;
  const take = (text: string, name?: string) => {
    if (text.length > CURVE_LONGEST) {
      return setTooLong(
        `${name ?? "What was pasted"} has ${text.length} characters; a curve has ${CURVE_LONGEST} at most. Keep two columns, fewer rows or fewer digits.`,
      );
    }
    setTooLong(null);
    set("curveTable", text === "" ? null : text);
  };
  return (
    <View style={{ gap: 16 }}>
      <FilePick
        label="Choose a CSV file of the curve"
        accept=".csv,.txt,.dat,.tsv"
        onPick={({ name, text }) => take(text, name)}
      />
      <Field
        name="curveTable"
        label="Rows of the curve"
        numeric
        multiline
        rows={6}
        inputMode="text"
        value={curveTable ?? ""}
        hint={`A row is a value as printed, then its density or ln L; ${CURVE_FEWEST_ROWS} to ${CURVE_MOST_ROWS} rows. # begins a comment.`}
        error={tooLong ?? (curveTable === null ? error : undefined)}
        onBlur={onBlur}
        onChangeText={(text) => take(text)}
      />
      <Choice
        label="The second column holds"
        placeholder="Choose"
        value={curveColumn}
        options={CURVE_COLUMNS.map((value) => ({ value, label: CURVE_COLUMN_WORDS[value] }))}
        error={columnError}
        onChange={(value) => set("curveColumn", value as ConstraintFields["curveColumn"])}
      />
      {curveTable === null ? null : <WhatWasRead fields={fields} error={error} />}
      {curveTable === null ? null : (
        <View style={{ flexDirection: "row", marginLeft: -12 }}>
          <Button
            kind="text"
            icon="close"
            label="Take the curve out"
            onPress={() => set("curveTable", null)}
          />
        </View>
      )}
    </View>
  );
}

function WhatWasRead({ fields, error }: { fields: ConstraintFields; error?: string }) {
  const colors = useColors();
  const table = fields.curveTable ?? "";
  const { problems, header } = parseCurve(table, fields.curveColumn);
  const said =
    problems.length > 0
      ? problems.slice(0, MOST_SAID).map(({ line, message }) => ({
          key: `${line}`,
          text: line === null ? message : `Line ${line}: ${message}`,
        }))
      : error
        ? [{ key: "error", text: error }]
        : [];
  const more = problems.length - said.length;
  const nodes = curveAsPrinted(fields);
  return (
    <View role="status" style={{ gap: 8 }}>
      {problems.length === 0 ? (
        <Dense>
          {`${curveText(table, fields.curveColumn)}.`}
          {header ? ` Columns: ${header.join(", ")}.` : ""}
        </Dense>
      ) : null}
      {said.map(({ key, text }) => (
        <View key={key} style={{ flexDirection: "row", gap: 6 }}>
          <Icon name="close-circle-outline" size={16} color={colors.emberText} />
          <Caption style={{ color: colors.emberText, flex: 1 }}>{withTrueMinus(text)}</Caption>
        </View>
      ))}
      {more > 0 ? (
        <Caption style={{ color: colors.emberText, paddingLeft: 22 }}>
          {more === 1 ? "One more line has a problem." : `${more} more lines have a problem.`}
        </Caption>
      ) : null}
      {nodes && problems.length === 0 ? (
        <LikelihoodCurve
          lines={[{ x: nodes.x, density: nodes.p, label: "the curve as printed" }]}
          words="Curve as printed"
          symbol={printedSymbol(fields)}
          height={148}
        />
      ) : null}
    </View>
  );
}

/** The symbol of what is printed: "x_HII", "log x_HI", "τ". */
function printedSymbol(fields: ConstraintFields): string {
  const alone = notationAsPrinted({ ...fields, kind: "qualitative" });
  return lineText({ ...alone, tail: "" });
}
