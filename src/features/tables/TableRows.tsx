import { StyleSheet, View } from "react-native";

import { DataTable } from "@/components/DataTable";
import { Card } from "@/components/Card";
import { Marker } from "@/components/Marker";
import { NotationText } from "@/components/NotationText";
import { Dense, Mono } from "@/components/Text";
import { space } from "@/theme/tokens";
import type { TableCandidatesQuery } from "~graphql/generated/graphql";
import { rowLikelihood } from "~shared/likelihood";
import { familyOf } from "~shared/methods/vocabulary";
import { asUsed } from "~shared/statement/asUsed";
import type { ConstraintFields } from "~shared/statement/fields";
import { notationAsPrinted, notationAsUsed } from "~shared/statement/notation";
import { levelPhrase, QUANTITY_WORDS, ROLE_WORDS } from "~shared/statement/words";

export type TableConstraint = TableCandidatesQuery["constraints"]["constraints"][number];

/** "7.51", "6.5 to 6.7, bin average", or the quantity where a row has no redshift. */
export function whereText(fields: ConstraintFields): string {
  if (fields.quantity !== "neutralFraction" && fields.quantity !== null) {
    return QUANTITY_WORDS[fields.quantity];
  }
  const range = fields.zLow && fields.zHigh ? `${fields.zLow} to ${fields.zHigh}` : null;
  const role =
    fields.zRole && fields.zRole !== "point" ? `, ${ROLE_WORDS[fields.zRole].toLowerCase()}` : "";
  return `${fields.z ?? range ?? "open"}${fields.z && range ? ` (${range})` : ""}${role}`;
}

/** The form a likelihood takes for a row, in words; why there is none otherwise. */
export function formText(fields: ConstraintFields): string {
  const used = asUsed(fields);
  if (used === null) return "none";
  const row = rowLikelihood(used);
  return "leftOut" in row ? "none yet" : row.form;
}

/** The rows a table hands out, as printed beside as used. */
export function TableRows({ constraints }: { constraints: readonly TableConstraint[] }) {
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
        rows={constraints.map(({ number, quotable, fields, citation }) => {
          const family = familyOf(fields.methodTags);
          const used = asUsed(fields);
          return {
            id: number,
            source: (
              <View style={styles.source}>
                {family ? (
                  <Marker family={family} hollow={fields.kind !== "twoSided"} size={18} />
                ) : null}
                <Dense>{citation.shortName}</Dense>
              </View>
            ),
            where: <Dense>{whereText(fields)}</Dense>,
            printed: <NotationText notation={notationAsPrinted(fields)} tail={false} symbol />,
            used: used ? (
              <NotationText notation={notationAsUsed(used)} tail={false} />
            ) : (
              <Dense muted>none</Dense>
            ),
            level: <Dense>{levelPhrase(fields.level, fields.levelPercent)}</Dense>,
            form: <Dense muted>{formText(fields)}</Dense>,
            number: <Mono>{quotable}</Mono>,
          };
        })}
        rowKey={({ id }) => id}
      />
    </Card>
  );
}

const styles = StyleSheet.create({
  source: { flexDirection: "row", alignItems: "center", gap: space.s },
});
