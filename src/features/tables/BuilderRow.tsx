import { useEffect, useRef, type ReactNode } from "react";
import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { Field } from "@/components/Field";
import { Marker } from "@/components/Marker";
import { NotationText } from "@/components/NotationText";
import { RecordTitle } from "@/components/RecordTitle";
import { Caption, Dense, Label, Mono } from "@/components/Text";
import { useLayoutClass } from "@/layout/useLayoutClass";
import { useColors } from "@/theme/ThemeProvider";
import { space, target } from "@/theme/tokens";
import { familyOf } from "~shared/methods/vocabulary";
import { notationAsPrinted, recordTitle } from "~shared/statement/notation";
import { levelPhrase } from "~shared/statement/words";

import { formText, type TableConstraint, Where } from "./RowParts";
import type { RowChoice } from "./useTableDraft";

export interface BuiltRow {
  constraint: TableConstraint;
  included: boolean;
  reason: string;
  proposedIn: boolean;
  proposedReason: string | null;
  cautions: readonly string[];
}

interface Props {
  row: BuiltRow;
  /** The record that the page was opened for. */
  wanted: boolean;
  onChoose: (choice: RowChoice | null) => void;
}

/** One candidate: in or out, why, and what to know about it. */
export function BuilderRow({ row, wanted, onChoose }: Props) {
  const colors = useColors();
  const wide = useLayoutClass() === "wide";
  const place = useRef<View>(null);
  useEffect(() => {
    // On the web a View is an element; nothing else knows where the page is scrolled.
    if (wanted)
      (place.current as unknown as HTMLElement | null)?.scrollIntoView?.({ block: "center" });
  }, [wanted]);
  const back = wanted ? colors.petrolTint : undefined;
  return (
    <View ref={place} style={[styles.row, { backgroundColor: back }]}>
      {wide ? (
        <WideFacts row={row} onChoose={onChoose} />
      ) : (
        <NarrowFacts row={row} onChoose={onChoose} />
      )}
      <Why row={row} onChoose={onChoose} />
    </View>
  );
}

/** Heads of the columns of wide rows; the rows say their parts themselves. */
export function BuilderHead() {
  return (
    <View style={[styles.line, styles.head]} aria-hidden>
      <View style={styles.source}>
        <Caption muted style={styles.sourceHead}>
          Source
        </Caption>
      </View>
      <Caption muted style={styles.where}>
        Redshift
      </Caption>
      <Caption muted style={styles.value}>
        As printed
      </Caption>
      <Caption muted style={styles.level}>
        Level
      </Caption>
      <Caption muted style={styles.form}>
        Form
      </Caption>
      <Caption muted style={styles.number}>
        Record
      </Caption>
    </View>
  );
}

function Take({
  row: { constraint, included, proposedIn },
  onChoose,
  children,
}: Pick<Props, "row" | "onChoose"> & { children: ReactNode }) {
  const colors = useColors();
  const { citation, fields } = constraint;
  return (
    <label style={{ ...labelStyle, minHeight: target }}>
      <input
        type="checkbox"
        aria-label={`${citation.shortName}: ${recordTitle(fields)}`}
        checked={included}
        onChange={({ target: { checked } }) =>
          onChoose(checked === proposedIn ? null : { included: checked, reason: "" })
        }
        style={{ width: 20, height: 20, margin: 2, flexShrink: 0, accentColor: colors.primary }}
      />
      {children}
    </label>
  );
}

function FamilyOf({ constraint: { fields } }: { constraint: TableConstraint }) {
  const family = familyOf(fields.methodTags);
  return (
    <View style={styles.marker}>
      {family ? <Marker family={family} hollow={fields.kind !== "twoSided"} size={18} /> : null}
    </View>
  );
}

function WideFacts({ row, onChoose }: Pick<Props, "row" | "onChoose">) {
  const { constraint, included } = row;
  const { fields, citation, number } = constraint;
  return (
    <View style={styles.line}>
      <View style={styles.source}>
        <Take row={row} onChoose={onChoose}>
          <FamilyOf constraint={constraint} />
          <Dense muted={!included} style={styles.name}>
            {citation.shortName}
          </Dense>
        </Take>
      </View>
      <View style={styles.where}>
        <Where fields={fields} />
      </View>
      <View style={styles.value}>
        <Stated constraint={constraint} />
      </View>
      <Dense style={styles.level}>{levelPhrase(fields.level, fields.levelPercent)}</Dense>
      <Dense muted style={styles.form}>
        {formText(fields)}
      </Dense>
      <Mono style={styles.number}>{number}</Mono>
    </View>
  );
}

function Stated({ constraint: { fields } }: { constraint: TableConstraint }) {
  return fields.kind === "qualitative" ? (
    <Dense muted>qualitative</Dense>
  ) : (
    <NotationText notation={notationAsPrinted(fields)} symbol tail={false} />
  );
}

function NarrowFacts({ row, onChoose }: Pick<Props, "row" | "onChoose">) {
  const { constraint, included } = row;
  const { fields, citation, number } = constraint;
  return (
    <View style={styles.narrow}>
      <Take row={row} onChoose={onChoose}>
        <FamilyOf constraint={constraint} />
        <View style={styles.words}>
          <Label style={styles.name}>{citation.shortName}</Label>
          <Dense muted={!included}>
            <RecordTitle fields={fields} />
          </Dense>
        </View>
      </Take>
      <View style={[styles.indent, styles.facts]}>
        <Stated constraint={constraint} />
        <Caption muted>
          {levelPhrase(fields.level, fields.levelPercent)}
          {fields.level ? " · " : ""}
          <Mono>{number}</Mono>
        </Caption>
      </View>
    </View>
  );
}

/** Why a row is out, or in against the proposal: the proposal's words or a person's. */
function Why({ row, onChoose }: Pick<Props, "row" | "onChoose">) {
  const colors = useColors();
  const { included, reason, proposedIn, proposedReason, cautions } = row;
  const against = included !== proposedIn;
  return (
    <>
      {against ? (
        <View style={styles.indent}>
          {proposedReason ? <Caption muted>Proposed out: {proposedReason}.</Caption> : null}
          <View style={styles.reason}>
            <View style={styles.reasonField}>
              <Field
                label={included ? "Why it is in all the same" : "Why it is left out"}
                value={reason}
                onChangeText={(text) => onChoose({ included, reason: text })}
                maxLength={300}
              />
            </View>
            <Button label="As proposed" kind="text" icon="undo" onPress={() => onChoose(null)} />
          </View>
        </View>
      ) : included ? null : (
        <Caption muted style={styles.indent}>
          Out, as proposed: {reason}.
        </Caption>
      )}
      {cautions.map((caution) => (
        <Caption key={caution} style={[styles.indent, { color: colors.emberText }]}>
          {caution}.
        </Caption>
      ))}
    </>
  );
}

/** Where the words of a row begin: behind its box and its marker. */
const INDENT = 66;

const labelStyle = {
  display: "flex",
  alignItems: "center",
  gap: space.s,
  cursor: "pointer",
  minWidth: 0,
} as const;

const styles = StyleSheet.create({
  row: { paddingHorizontal: space.m, paddingVertical: 1 },
  line: { flexDirection: "row", alignItems: "center", gap: space.s, minHeight: target },
  head: { paddingHorizontal: space.m, minHeight: 36 },
  source: { flex: 1.8, minWidth: 0 },
  sourceHead: { paddingLeft: INDENT },
  name: { flexShrink: 1 },
  marker: { width: 18, flexShrink: 0 },
  where: { flex: 0.95, minWidth: 0 },
  value: { flex: 1.2, minWidth: 0 },
  level: { flex: 0.7, minWidth: 0 },
  form: { flex: 1.15, minWidth: 0 },
  number: { width: 72, textAlign: "right", fontSize: 14 },
  narrow: { paddingVertical: space.xxs },
  words: { flexShrink: 1, minWidth: 0 },
  facts: { flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: space.s },
  indent: { paddingLeft: INDENT, paddingBottom: space.xs },
  reason: { flexDirection: "row", flexWrap: "wrap", alignItems: "center", columnGap: space.s },
  reasonField: { flexGrow: 1, flexShrink: 1, flexBasis: 240, minWidth: 0 },
});
