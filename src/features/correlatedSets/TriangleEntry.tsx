import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { Field } from "@/components/Field";
import { Caption } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { fonts, radius, space, target } from "@/theme/tokens";
import { isReadAgain } from "~shared/correlatedSet/reading";
import { entryAt, type MatrixKind } from "~shared/correlatedSet/content";
import { readMatrixText } from "~shared/correlatedSet/paste";

/**
 * The lower triangle of a matrix as it is typed from the paper; the upper half mirrors it. A matrix
 * can be pasted whole.
 *
 * @param labels - Of the records, in their order, [n].
 * @param wrong - Entries with an error, as "entry.2.1" (row and column from 1).
 */
export function TriangleEntry({
  labels,
  matrixKind,
  triangle,
  onChange,
  wrong = new Set(),
}: {
  labels: readonly { number: string; words: string }[];
  matrixKind: MatrixKind | null;
  triangle: readonly (readonly string[])[];
  onChange: (triangle: string[][]) => void;
  wrong?: ReadonlySet<string>;
}) {
  const colors = useColors();
  const [pasting, setPasting] = useState(false);
  const size = labels.length;
  const put = (row: number, column: number, text: string): void =>
    onChange(
      triangle.map((entries, i) =>
        entries.map((old, j) => (i === row && j === column ? text : old)),
      ),
    );
  const head = { padding: "4px 8px", fontWeight: 400, fontSize: 13, color: colors.muted } as const;
  return (
    <View style={styles.all}>
      <div style={{ overflowX: "auto", maxWidth: "100%" }} role="group" aria-label="Lower triangle">
        <table style={{ borderCollapse: "separate", borderSpacing: 4, color: colors.ink }}>
          <caption className="fogline-hidden">
            Lower triangle of the matrix; the upper half mirrors it
          </caption>
          <thead>
            <tr>
              <td />
              {labels.map((label, at) => (
                <th
                  key={label.number}
                  scope="col"
                  aria-label={`${label.number}, ${label.words}`}
                  style={{ ...head, fontFamily: fonts.mono }}
                >
                  {at + 1}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {labels.map((label, row) => (
              <tr key={label.number}>
                <th scope="row" style={{ ...head, textAlign: "left", fontFamily: fonts.sans }}>
                  <span style={{ fontFamily: fonts.mono }}>{row + 1}</span>{" "}
                  <span style={{ color: colors.ink }}>{label.words}</span>
                </th>
                {labels.map((column, at) => (
                  <td key={column.number} style={{ padding: 0 }}>
                    {at > row ? (
                      <div style={mirrored(colors.muted)} aria-hidden>
                        {entryAt(triangle, row, at).replace(/^-/, "−")}
                      </div>
                    ) : isReadAgain(matrixKind, row, at) ? (
                      <input
                        value={triangle[row]?.[at] ?? ""}
                        onChange={(event) => put(row, at, event.target.value)}
                        onPaste={(event) => {
                          const pasted = readMatrixText(event.clipboardData.getData("text"));
                          if (!("triangle" in pasted) || pasted.triangle.length !== size) return;
                          if (size < 2) return;
                          event.preventDefault();
                          onChange(pasted.triangle);
                        }}
                        inputMode="decimal"
                        autoComplete="off"
                        aria-label={`Row ${row + 1}, column ${at + 1}`}
                        aria-invalid={wrong.has(`entry.${row + 1}.${at + 1}`) || undefined}
                        className="fogline-focusable"
                        style={{
                          width: 84,
                          height: target,
                          padding: "0 8px",
                          textAlign: "right",
                          fontFamily: fonts.mono,
                          fontSize: 16,
                          color: colors.ink,
                          backgroundColor: colors.surface,
                          borderRadius: radius.field,
                          border: `1px solid ${wrong.has(`entry.${row + 1}.${at + 1}`) ? colors.ember : colors.outline}`,
                        }}
                      />
                    ) : (
                      <div style={mirrored(colors.ink)} aria-label="1, on the diagonal">
                        1
                      </div>
                    )}
                  </td>
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      {pasting ? (
        <PasteMatrix
          size={size}
          onTake={(taken) => {
            onChange(taken);
            setPasting(false);
          }}
          onClose={() => setPasting(false)}
        />
      ) : size > 1 ? (
        <View style={styles.line}>
          <Button kind="text" label="Paste the matrix as text" onPress={() => setPasting(true)} />
        </View>
      ) : null}
    </View>
  );
}

function mirrored(color: string) {
  return {
    width: 84,
    height: target,
    lineHeight: `${target}px`,
    padding: "0 9px",
    textAlign: "right",
    boxSizing: "border-box",
    fontFamily: fonts.mono,
    fontSize: 16,
    color,
  } as const;
}

function PasteMatrix({
  size,
  onTake,
  onClose,
}: {
  size: number;
  onTake: (triangle: string[][]) => void;
  onClose: () => void;
}) {
  const [text, setText] = useState("");
  const read = text.trim() === "" ? null : readMatrixText(text);
  const problem =
    read === null
      ? null
      : "problem" in read
        ? read.problem
        : read.triangle.length !== size
          ? `This matrix has ${read.triangle.length} rows, and the set ${size} records.`
          : null;
  return (
    <View style={styles.all}>
      <Field
        label="Matrix as text"
        multiline
        rows={Math.min(8, size + 1)}
        value={text}
        onChangeText={setText}
        error={problem}
        hint="One row in a line, the square or its lower triangle; numbers parted by blanks, commas or &."
      />
      <View style={styles.line}>
        <Button
          kind="tonal"
          label="Put it in"
          disabledBecause={
            read === null ? "Paste it first." : problem !== null ? "Not yet." : undefined
          }
          onPress={() => {
            if (read && "triangle" in read && problem === null) onTake(read.triangle);
          }}
        />
        <Button kind="text" label="Cancel" onPress={onClose} />
      </View>
      <Caption>Look over every number: a text copied from a page loses signs easily.</Caption>
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.xs },
  line: { flexDirection: "row", flexWrap: "wrap", gap: space.xs },
});
