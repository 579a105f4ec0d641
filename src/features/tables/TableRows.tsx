import { StyleSheet, View, type TextStyle } from "react-native";

import { Card, Divider } from "@/components/Card";
import { DataTable } from "@/components/DataTable";
import { NotationText } from "@/components/NotationText";
import { Caption, Dense, Mono, SymbolText } from "@/components/Text";
import { web } from "@/components/web";
import { useLayoutClass } from "@/layout/useLayoutClass";
import { space } from "@/theme/tokens";
import type { RowPartsFragment } from "~graphql/generated/graphql";
import { FORM_WORDS } from "~shared/likelihood";
import { asUsed } from "~shared/statement/asUsed";
import type { ConstraintFields } from "~shared/statement/fields";
import { notationAsPrinted, notationAsUsed, percentText } from "~shared/statement/notation";
import { levelPhrase } from "~shared/statement/words";

import { Source, type TableConstraint, Where } from "./RowParts";

/** The rows a table hands out, as printed beside as used. */
export function TableRows({
  constraints,
  rows,
}: {
  constraints: readonly TableConstraint[];
  rows: readonly RowPartsFragment[];
}) {
  const byNumber = new Map(rows.map((row) => [row.number, row]));
  const decided: Decided = ({ number }) => byNumber.get(number) ?? null;
  return useLayoutClass() === "compact" ? (
    <Listed constraints={constraints} decided={decided} />
  ) : (
    <Tabled constraints={constraints} decided={decided} />
  );
}

/** What the table decided about a record. */
type Decided = (constraint: TableConstraint) => RowPartsFragment | null;

interface Props {
  constraints: readonly TableConstraint[];
  decided: Decided;
}

/** Level as printed, or as the table decided where the paper states none. */
function levelOf(constraint: TableConstraint, row: RowPartsFragment | null): string {
  const { level, levelPercent } = constraint.fields;
  return level === "notStated" && typeof row?.level === "number"
    ? `read as ${percentText(row.level)}`
    : levelPhrase(level, levelPercent);
}

function formOf(row: RowPartsFragment | null): string {
  if (!row?.form) return "none";
  const words = FORM_WORDS[row.form];
  if (row.mixture) return `${words}, weight ${Number(row.weight.toPrecision(3))}`;
  return row.set ? `${words}, correlated` : words;
}

function Tabled({ constraints, decided }: Props) {
  return (
    <Card flush>
      <DataTable
        caption="Rows of the table"
        columns={[
          { key: "source", title: "Source" },
          { key: "where", title: "Redshift" },
          { key: "printed", title: "As printed" },
          { key: "used", title: "As used" },
          { key: "level", title: "Level" },
          { key: "form", title: "Form" },
          { key: "number", title: "Record", align: "right" },
        ]}
        rows={constraints.map((constraint) => ({
          id: constraint.number,
          source: <Source constraint={constraint} />,
          where: <Where fields={constraint.fields} />,
          printed: (
            <NotationText notation={notationAsPrinted(constraint.fields)} tail={false} symbol />
          ),
          used: <Used fields={constraint.fields} />,
          level: <Dense>{levelOf(constraint, decided(constraint))}</Dense>,
          form: <Dense muted>{formOf(decided(constraint))}</Dense>,
          number: <Mono style={oneLine}>{constraint.quotable}</Mono>,
        }))}
        rowKey={({ id }) => id}
      />
    </Card>
  );
}

function Used({ fields }: { fields: ConstraintFields }) {
  const used = asUsed(fields);
  return used ? (
    <NotationText notation={notationAsUsed(used)} tail={false} />
  ) : (
    <Dense muted>none</Dense>
  );
}

/** The same on a phone, where seven columns have no room. */
function Listed({ constraints, decided }: Props) {
  return (
    <Card flush>
      <View role="list" aria-label="Rows of the table">
        {constraints.map((constraint, index) => {
          const { number, quotable, fields } = constraint;
          return (
            <View key={number} role="listitem">
              {index > 0 ? <Divider /> : null}
              <View style={styles.row}>
                <View style={styles.between}>
                  <View style={styles.grow}>
                    <Source constraint={constraint} />
                  </View>
                  <Mono style={styles.number}>{quotable}</Mono>
                </View>
                <View style={styles.facts}>
                  <View style={styles.fact}>
                    <Caption muted>As printed</Caption>
                    <NotationText notation={notationAsPrinted(fields)} tail={false} symbol />
                  </View>
                  <View style={styles.fact}>
                    <Caption muted>As used</Caption>
                    <Used fields={fields} />
                  </View>
                </View>
                <Caption muted>
                  {fields.quantity === "neutralFraction" ? (
                    <>
                      <SymbolText muted>z</SymbolText>
                      {" = "}
                    </>
                  ) : null}
                  <Where fields={fields} />
                  {` · ${[levelOf(constraint, decided(constraint)), formOf(decided(constraint))].filter(Boolean).join(" · ")}`}
                </Caption>
              </View>
            </View>
          );
        })}
      </View>
    </Card>
  );
}

const oneLine = web({ whiteSpace: "nowrap" }) as TextStyle;

const styles = StyleSheet.create({
  row: { paddingHorizontal: space.m, paddingVertical: space.s, gap: space.xs },
  between: {
    flexDirection: "row",
    alignItems: "center",
    justifyContent: "space-between",
    gap: space.s,
  },
  grow: { flex: 1, minWidth: 0 },
  number: { fontSize: 13 },
  facts: { flexDirection: "row", flexWrap: "wrap", columnGap: space.s, rowGap: space.xs },
  fact: { gap: 2, flexGrow: 1, flexShrink: 0, flexBasis: 140 },
});
