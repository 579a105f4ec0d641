import { useEffect, useRef } from "react";
import { StyleSheet, View } from "react-native";

import { Marker } from "@/components/Marker";
import Icon from "@/components/Icon";
import { NotationText } from "@/components/NotationText";
import { Press } from "@/components/Press";
import { RecordTitle } from "@/components/RecordTitle";
import { Caption, Dense, Label, Mono } from "@/components/Text";
import { useLayoutClass } from "@/layout/useLayoutClass";
import { useColors } from "@/theme/ThemeProvider";
import { space, target } from "@/theme/tokens";
import type { RowPartsFragment } from "~graphql/generated/graphql";
import { FORM_WORDS } from "~shared/likelihood";
import { familyOf } from "~shared/methods/vocabulary";
import { asUsed } from "~shared/statement/asUsed";
import { notationAsUsed, percentText } from "~shared/statement/notation";
import { hasBestValue } from "~shared/statement/relevant";

import { DecisionNumber } from "./DecisionNumber";
import { type TableConstraint, Where } from "./RowParts";

export interface BuiltRow {
  row: RowPartsFragment;
  constraint: TableConstraint;
  /** Numbers of the decisions that concern it, from 1, the open ones first. */
  decisions: readonly { number: number; open: boolean }[];
}

interface Props {
  built: BuiltRow;
  /** The record that the page was opened for. */
  wanted: boolean;
  onOpen: () => void;
}

/** One candidate: in or out, why, and what is still open about it. Touching it opens its sheet. */
export function BuilderRow({ built, wanted, onOpen }: Props) {
  const colors = useColors();
  const wide = useLayoutClass() === "wide";
  const { row } = built;
  const waits = row.open.length > 0;
  const back = waits ? colors.emberTint : wanted ? colors.petrolTint : undefined;
  const place = useRef<View>(null);
  useEffect(() => {
    // On the web a View is an element; nothing else knows where the page is scrolled.
    if (wanted)
      (place.current as unknown as HTMLElement | null)?.scrollIntoView?.({ block: "center" });
  }, [wanted]);
  return (
    <View ref={place}>
      <Press onPress={onOpen} style={[styles.row, { backgroundColor: back }]}>
        {wide ? <WideFacts built={built} /> : <NarrowFacts built={built} />}
        {row.included ? null : (
          <Caption muted style={styles.indent}>
            {`Out: ${row.reason ?? "hidden until your second reading is stored"}`}
          </Caption>
        )}
        {row.cautions.map((caution) => (
          <Caption key={caution} style={[styles.indent, { color: colors.emberText }]}>
            {caution.replace(/\.$/, "")}.
          </Caption>
        ))}
        <span className="fogline-hidden">{row.included ? ", in" : ", out"}</span>
      </Press>
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
        As used
      </Caption>
      <Caption muted style={styles.level}>
        Level
      </Caption>
      <Caption muted style={styles.form}>
        Form
      </Caption>
      <View style={styles.status} />
    </View>
  );
}

function FamilyOf({ fields }: { fields: TableConstraint["fields"] }) {
  const family = familyOf(fields.methodTags);
  return (
    <View style={styles.marker}>
      {family ? <Marker family={family} hollow={!hasBestValue(fields.kind)} size={18} /> : null}
    </View>
  );
}

function Stated({ fields }: { fields: TableConstraint["fields"] }) {
  const used = asUsed(fields);
  return used && fields.kind !== "qualitative" ? (
    <NotationText
      notation={notationAsUsed(used)}
      symbol={fields.quantity !== "neutralFraction"}
      tail={false}
    />
  ) : (
    <Dense muted>{fields.kind === "qualitative" ? "qualitative" : "not usable"}</Dense>
  );
}

function levelText(row: RowPartsFragment): string {
  return row.level === null || row.level === undefined ? "not stated" : percentText(row.level);
}

function formWords(row: RowPartsFragment): string {
  if (!row.form) return row.open.length > 0 ? "open" : "none";
  const words = FORM_WORDS[row.form];
  return row.mixture ? `${words}, in a mixture` : row.set ? `${words}, correlated` : words;
}

function Status({ built: { row, decisions } }: { built: BuiltRow }) {
  const colors = useColors();
  const [first] = decisions.filter(({ open }) => open);
  if (first) return <DecisionNumber number={first.number} open />;
  return (
    <Icon
      name={row.included ? "check" : "minus"}
      size={20}
      color={row.included ? colors.primary : colors.muted}
    />
  );
}

function WideFacts({ built }: { built: BuiltRow }) {
  const { constraint, row } = built;
  const { fields, citation } = constraint;
  return (
    <View style={styles.line}>
      <View style={[styles.source, styles.sourceLine]}>
        <FamilyOf fields={fields} />
        <Dense muted={!row.included} style={styles.name}>
          {citation.shortName}
        </Dense>
      </View>
      <View style={styles.where}>
        <Where fields={fields} />
      </View>
      <View style={styles.value}>
        <Stated fields={fields} />
      </View>
      <Dense muted={!row.included} style={styles.level}>
        {levelText(row)}
      </Dense>
      <Dense muted style={styles.form}>
        {formWords(row)}
      </Dense>
      <View style={styles.status}>
        <Status built={built} />
      </View>
    </View>
  );
}

function NarrowFacts({ built }: { built: BuiltRow }) {
  const { constraint, row } = built;
  const { fields, citation } = constraint;
  return (
    <View style={styles.narrow}>
      <FamilyOf fields={fields} />
      <View style={styles.words}>
        <Label style={styles.name}>{citation.shortName}</Label>
        <Dense muted={!row.included}>
          <RecordTitle fields={fields} />
        </Dense>
        <View style={styles.facts}>
          <Stated fields={fields} />
          <Caption muted>
            {levelText(row)} · {formWords(row)} · <Mono>{constraint.number}</Mono>
          </Caption>
        </View>
      </View>
      <View style={styles.status}>
        <Status built={built} />
      </View>
    </View>
  );
}

/** Where the words of a row begin: behind its marker. */
const INDENT = 30;

const styles = StyleSheet.create({
  row: { paddingHorizontal: space.m, paddingVertical: 1 },
  line: { flexDirection: "row", alignItems: "center", gap: space.s, minHeight: target },
  head: { paddingHorizontal: space.m, minHeight: 36 },
  source: { flex: 1.55, minWidth: 0 },
  sourceLine: { flexDirection: "row", alignItems: "center", gap: space.s },
  sourceHead: { paddingLeft: INDENT },
  name: { flexShrink: 1 },
  marker: { width: 18, flexShrink: 0 },
  where: { flex: 1.12, minWidth: 0 },
  value: { flex: 1.2, minWidth: 0 },
  level: { flex: 0.72, minWidth: 0 },
  form: { flex: 1.1, minWidth: 0 },
  status: { width: 28, alignItems: "center", flexShrink: 0 },
  narrow: {
    flexDirection: "row",
    alignItems: "center",
    gap: space.s,
    paddingVertical: space.xs,
  },
  words: { flex: 1, minWidth: 0, gap: 2 },
  facts: { flexDirection: "row", flexWrap: "wrap", alignItems: "center", columnGap: space.s },
  indent: { paddingLeft: INDENT, paddingBottom: space.xs },
});
