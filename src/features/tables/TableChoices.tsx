import { StyleSheet, View } from "react-native";

import { Card, Divider } from "@/components/Card";
import { Caption, Dense, Label, Section } from "@/components/Text";
import { space } from "@/theme/tokens";
import type { TableBySlugQuery } from "~graphql/generated/graphql";
import { DECISION_WORDS } from "~shared/table/decision";

import { Groups } from "./Groups";

type Table = NonNullable<TableBySlugQuery["fittingTable"]>;

/** Every decision with what was taken, by whom and why, and what enters together. */
export function TableChoices({ table }: { table: Table }) {
  if (table.decisions.length === 0 && table.mixtures.length + table.sets.length === 0) return null;
  return (
    <View style={styles.all}>
      <Section>Decisions</Section>
      {table.decisions.length > 0 ? (
        <Card flush>
          <View role="list" aria-label="Decisions">
            {table.decisions.map(
              ({ id, kind, words, options, taken, byDefault, reason }, index) => (
                <View key={id} role="listitem">
                  {index > 0 ? <Divider /> : null}
                  <View style={styles.row}>
                    <Label>{DECISION_WORDS[kind]}</Label>
                    <Dense>{words}</Dense>
                    <Dense>
                      {`${options.find(({ code }) => code === taken)?.words ?? "Open"}${byDefault ? ", as proposed" : ", chosen by the table's owner"}.`}
                    </Dense>
                    {reason ? <Caption>{`Reason: ${reason}`}</Caption> : null}
                  </View>
                </View>
              ),
            )}
          </View>
        </Card>
      ) : null}
      <Groups mixtures={table.mixtures} sets={table.sets} />
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.s },
  row: { paddingHorizontal: space.m, paddingVertical: space.s, gap: space.xxs },
});
