import { useQuery } from "@apollo/client/react";
import { StyleSheet, View } from "react-native";

import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Card, Divider } from "@/components/Card";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Press } from "@/components/Press";
import { Caption, Dense, Label, Mono, Section } from "@/components/Text";
import { dateTime } from "@/components/when";
import { Screen } from "@/layout/Screen";
import { space } from "@/theme/tokens";
import { ReleaseList } from "@/components/releases/ReleaseList";
import { TableListDocument, type TableListQuery } from "~graphql/generated/graphql";

import { VISIBILITY_WORDS } from "./SaveTable";

type Listed = TableListQuery["fittingTables"][number];

/** Saved fitting tables, one's own first. */
export function TablesScreen() {
  const { viewer } = useSession();
  const { data, error, loading, refetch } = useQuery(TableListDocument, {
    fetchPolicy: "cache-and-network",
  });
  const tables = data?.fittingTables;
  const mine = tables?.filter(({ ownedByMe }) => ownedByMe) ?? [];
  const others = tables?.filter(({ ownedByMe }) => !ownedByMe) ?? [];
  return (
    <Screen
      title="Tables"
      subtitle="Releases of the registry, and fitting tables: chosen rows, each choice with its reason"
      actions={<Button label="New table" kind="filled" icon="plus" href="/tables/new" />}
    >
      <View style={styles.group}>
        <Section>Releases</Section>
        <ReleaseList />
      </View>
      {error && !tables ? (
        <Failed error={error} onRetry={() => void refetch()} />
      ) : !tables ? (
        loading ? (
          <Loading label="Fetching the tables" />
        ) : null
      ) : tables.length === 0 ? (
        <Card>
          <Empty
            icon="table"
            title="No fitting table yet"
            text="Filter the constraints, choose the rows, save: the table keeps its bytes for ever and anyone can fetch it."
            action={<Button label="Build the first one" kind="tonal" href="/tables/new" />}
          />
        </Card>
      ) : (
        <View style={styles.all}>
          {viewer && mine.length > 0 ? <Group title="Your tables" tables={mine} /> : null}
          {others.length > 0 ? (
            <Group title={mine.length > 0 ? "Tables of others" : "Saved tables"} tables={others} />
          ) : null}
        </View>
      )}
    </Screen>
  );
}

function Group({ title, tables }: { title: string; tables: readonly Listed[] }) {
  return (
    <View style={styles.group}>
      <Section>{title}</Section>
      <Card flush>
        <View role="list">
          {tables.map((table, index) => (
            <View key={table.slug} role="listitem">
              {index > 0 ? <Divider /> : null}
              <Press href={`/tables/${table.slug}`} style={styles.row}>
                <View style={styles.words}>
                  <Label>{table.name}</Label>
                  <Dense muted>{table.filter}</Dense>
                  <Caption muted>
                    {table.rowsIn} rows in, {table.rowsOut} out
                    {typeof table.release === "number" ? ` · over release ${table.release}` : ""}
                    {table.version > 1 ? ` · version ${table.version}` : ""}
                    {table.visibility === "public"
                      ? ""
                      : ` · ${VISIBILITY_WORDS[table.visibility].toLowerCase()}`}{" "}
                    · {table.owner}, {dateTime(table.createdAt)} · digest{" "}
                    <Mono>{table.digest.slice(0, 12)}</Mono>
                  </Caption>
                </View>
              </Press>
            </View>
          ))}
        </View>
      </Card>
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.l },
  group: { gap: space.s },
  row: { paddingHorizontal: space.m, paddingVertical: space.s, minHeight: 64 },
  words: { gap: 2 },
});
