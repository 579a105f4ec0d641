import { useQuery } from "@apollo/client/react";
import { StyleSheet, View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { space } from "@/theme/tokens";
import { RowsSinceDocument, type RowsSinceQuery } from "~graphql/generated/graphql";

import { Button } from "../Button";
import { Notice } from "../Notice";
import { Dense } from "../Text";
import { dateTime } from "../when";

type Row = NonNullable<RowsSinceQuery["fittingTable"]>["rowsSince"][number];

/**
 * What happened to the records of a saved table's rows since it took them: superseded, withdrawn, with
 * an erratum, or corrected. The table itself doesn't change by it. Nothing happened, nothing shown.
 */
export function RowsSince({ slug, version }: { slug: string; version: number | null }) {
  // Told by version, which the cache doesn't tell tables by.
  const { data, error, refetch } = useQuery(RowsSinceDocument, {
    variables: { slug, version },
    fetchPolicy: "no-cache",
  });
  const rows = data?.fittingTable?.rowsSince ?? [];
  if (error && !data) {
    return (
      <Notice
        grade="note"
        title="What happened to the rows since is not known now"
        action={<Button label="Try again" kind="outline" onPress={() => void refetch()} />}
      >
        {userMessage(error)}
      </Notice>
    );
  }
  if (rows.length === 0) return null;
  return (
    <Notice
      grade="caution"
      title={
        rows.length === 1
          ? "The record of one row changed since"
          : `The records of ${rows.length} rows changed since`
      }
    >
      <Dense>This table and its files stay as they were saved.</Dense>
      <View role="list" aria-label="Rows whose records changed since" style={styles.rows}>
        {rows.map((row) => (
          <View key={row.number} role="listitem" style={styles.row}>
            <Button label={row.number} kind="text" href={`/constraints/${row.number}`} />
            <View style={styles.words}>
              {sentences(row).map((words) => (
                <Dense key={words}>{words}</Dense>
              ))}
            </View>
          </View>
        ))}
      </View>
    </Notice>
  );
}

function sentences({ notices, newerRevision }: Row): string[] {
  const words = notices.map(({ kind, replacedBy, at, reason }) => {
    const what =
      kind === "withdrawn"
        ? "Withdrawn"
        : kind === "erratum"
          ? "Erratum recorded"
          : `Superseded by ${replacedBy ?? "another record"}`;
    return `${what}, ${dateTime(at)}. ${reason}`;
  });
  return newerRevision ? [...words, `Corrected: ${newerRevision} is in use now.`] : words;
}

const styles = StyleSheet.create({
  rows: { gap: space.xxs },
  row: { flexDirection: "row", alignItems: "flex-start", gap: space.xs, marginLeft: -12 },
  words: { flex: 1, minWidth: 0, paddingTop: 12 },
});
