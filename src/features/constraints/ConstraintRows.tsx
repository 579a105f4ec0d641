import { StyleSheet, View } from "react-native";

import { Divider } from "@/components/Card";
import { Marker } from "@/components/Marker";
import { NotationText } from "@/components/NotationText";
import { Press } from "@/components/Press";
import { StatusPill } from "@/components/StatusPill";
import { Caption, Dense, Label, SymbolText } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import { space } from "@/theme/tokens";
import type { ListedPartsFragment } from "~graphql/generated/graphql";
import { familyOf } from "~shared/methods/vocabulary";
import { asUsed } from "~shared/statement/asUsed";
import { notationAsPrinted, notationAsUsed } from "~shared/statement/notation";
import { hasBestValue } from "~shared/statement/relevant";
import { QUANTITY_WORDS } from "~shared/statement/words";

export type ListedConstraint = ListedPartsFragment;

const SHORT_ROLE: Record<string, string> = {
  binAverage: ", bin",
  uncertain: ", uncertain",
  sampleRange: ", sample",
};

/** What stands in front of a row: its redshift, or the quantity where it has none. */
export function Whereabouts({ fields }: { fields: ListedConstraint["fields"] }) {
  const z = fields.z ?? (fields.zLow && fields.zHigh ? `${fields.zLow} to ${fields.zHigh}` : null);
  if (z === null) {
    return <Label>{fields.quantity ? QUANTITY_WORDS[fields.quantity] : "Open"}</Label>;
  }
  return (
    <Label>
      <SymbolText>z</SymbolText> = {z}
      {SHORT_ROLE[fields.zRole ?? ""] ?? ""}
    </Label>
  );
}

/** Neutral-fraction rows read as used, so that a column compares like with like. */
export function RowNotation({ fields }: { fields: ListedConstraint["fields"] }) {
  const used = asUsed(fields);
  return (
    <NotationText notation={used ? notationAsUsed(used) : notationAsPrinted(fields)} tail={false} />
  );
}

/** The state of a record in a list, where it is not current. */
export function RowState({
  state,
  supersededBy,
}: Pick<ListedConstraint, "state" | "supersededBy">) {
  if (state === "current") return null;
  return (
    <View style={styles.state}>
      <StatusPill state={state} />
      {supersededBy ? <Caption muted>by {supersededBy}</Caption> : null}
    </View>
  );
}

/** Records as a list of links, for a phone and for the column beside a record. */
export function ConstraintRows({
  constraints,
  query,
  current,
}: {
  constraints: readonly ListedConstraint[];
  query: string;
  current?: string;
}) {
  const colors = useColors();
  return (
    <View role="list">
      {constraints.map(({ number, fields, citation, state, supersededBy }) => {
        const family = familyOf(fields.methodTags);
        return (
          <View key={number} role="listitem">
            <Press
              href={`/constraints/${number}${query}`}
              style={[styles.row, current === number && { backgroundColor: colors.petrolTint }]}
              attributes={{ "aria-current": current === number ? "page" : undefined }}
            >
              <View style={styles.content}>
                <View style={styles.marker}>
                  {family ? (
                    <Marker family={family} hollow={!hasBestValue(fields.kind)} size={18} />
                  ) : null}
                </View>
                <View style={styles.words}>
                  <Whereabouts fields={fields} />
                  <Dense muted>{citation.shortName}</Dense>
                  <RowState state={state} supersededBy={supersededBy} />
                </View>
                <View style={styles.value}>
                  {fields.kind === "qualitative" ? (
                    <Caption muted>qualitative</Caption>
                  ) : (
                    <RowNotation fields={fields} />
                  )}
                </View>
              </View>
            </Press>
            <Divider />
          </View>
        );
      })}
    </View>
  );
}

const styles = StyleSheet.create({
  row: { minHeight: 64, justifyContent: "center" },
  content: {
    flexDirection: "row",
    alignItems: "center",
    gap: space.s,
    paddingHorizontal: space.m,
    paddingVertical: space.xs,
  },
  marker: { width: 20, alignItems: "center" },
  words: { flex: 1, minWidth: 0 },
  state: {
    flexDirection: "row",
    flexWrap: "wrap",
    alignItems: "center",
    gap: space.xs,
    paddingTop: space.xxs,
  },
  value: { alignItems: "flex-end" },
});
