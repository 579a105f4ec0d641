import { useMutation, useQuery } from "@apollo/client/react";
import { useLocalSearchParams, useRouter } from "expo-router";
import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { DefinitionList } from "@/components/DefinitionList";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Notice } from "@/components/Notice";
import { RowsSince } from "@/components/recordLife/RowsSince";
import { Confirm } from "@/components/Sheet";
import { Block, Dense, Mono, Section } from "@/components/Text";
import { dateTime } from "@/components/when";
import { Screen } from "@/layout/Screen";
import { useLayoutClass } from "@/layout/useLayoutClass";
import { space } from "@/theme/tokens";
import {
  DeleteTableDocument,
  TableBySlugDocument,
  type TableBySlugQuery,
} from "~graphql/generated/graphql";

import { VISIBILITY_WORDS } from "./SaveTable";
import { TableChoices } from "./TableChoices";
import { TableFiles } from "./TableFiles";
import { TableVersions, TableWouldChange } from "./TableHistory";
import { TableRows } from "./TableRows";
import { TableSettings } from "./TableSettings";

type Table = NonNullable<TableBySlugQuery["fittingTable"]>;

/** A saved fitting table: rows in, rows out with the reason, digest, files. */
export function TableScreen() {
  const { slug, version } = useLocalSearchParams<{ slug: string; version?: string }>();
  const wanted = /^\d{1,6}$/.test(version ?? "") ? Number(version) : null;
  const { data, error, loading, refetch } = useQuery(TableBySlugDocument, {
    variables: { slug, version: wanted },
  });
  const table = data?.fittingTable;
  return (
    <Screen
      title={table?.name ?? "Fitting table"}
      subtitle={
        table
          ? `${table.rowsIn} rows in, ${table.rowsOut} out${table.version > 1 ? ` · version ${table.version}` : ""}`
          : undefined
      }
      back="/tables"
    >
      {table ? (
        <TableView table={table} />
      ) : error ? (
        <Failed error={error} onRetry={() => void refetch()} />
      ) : loading ? (
        <Loading label="Fetching the table" rows={6} />
      ) : (
        <Empty
          icon="table"
          title="No table at this address"
          text="Its owner may have deleted it, or the address is cut short."
          action={<Button label="All tables" kind="tonal" href="/tables" />}
        />
      )}
    </Screen>
  );
}

function TableView({ table }: { table: Table }) {
  const wide = useLayoutClass() === "wide";
  const { may } = useSession();
  const rowsIn = new Set(table.rows.filter(({ included }) => included).map(({ number }) => number));
  const out = table.rows.filter(({ included }) => !included);
  const against = table.rows.filter(({ included, reason }) => included && reason);
  return (
    <View style={styles.all}>
      <View style={wide ? styles.columns : styles.stack}>
        <View style={wide ? styles.main : undefined}>
          <Card>
            <DefinitionList
              items={[
                { term: "Filter", value: table.filter },
                { term: "Saved", value: `${dateTime(table.createdAt)} by ${table.owner}` },
                {
                  term: "Source",
                  value:
                    typeof table.release === "number"
                      ? `release ${table.release}`
                      : "latest approved records",
                },
                { term: "Seen by", value: VISIBILITY_WORDS[table.visibility].toLowerCase() },
                {
                  term: "Registry as of",
                  value: `event ${table.lastEvent.sequence}, ${dateTime(table.lastEvent.at)}`,
                },
                { term: "Digest", value: <Mono style={styles.digest}>{table.digest}</Mono> },
              ]}
            />
          </Card>
        </View>
        <View style={[wide ? styles.side : undefined, styles.stackSmall]}>
          <TableFiles table={table} />
        </View>
      </View>
      <RowsSince slug={table.slug} version={table.version} />
      <Notice grade="caution">
        <Dense>
          The choices are this table&apos;s, not the authors&apos;; cite the originals. Rows are
          taken as independent.
        </Dense>
      </Notice>
      <View style={styles.stackSmall}>
        <Section>Rows</Section>
        <TableRows
          constraints={table.constraints.filter(({ number }) => rowsIn.has(number))}
          rows={table.rows}
        />
      </View>
      <TableChoices table={table} />
      {against.length > 0 ? (
        <View style={styles.stackSmall}>
          <Block level={2}>In against the proposal</Block>
          <Reasons rows={against} />
        </View>
      ) : null}
      <View style={styles.stackSmall}>
        <Block level={2}>Left out</Block>
        {out.length === 0 ? (
          <Dense muted>Every row of the filter is in.</Dense>
        ) : (
          <Reasons rows={out} />
        )}
      </View>
      {table.methods ? (
        <View style={styles.stackSmall}>
          <Section>For a paper&apos;s section on methods</Section>
          <Mono style={styles.methods}>{table.methods}</Mono>
        </View>
      ) : null}
      <TableWouldChange table={table} />
      <TableVersions table={table} />
      <View style={styles.buttons}>
        <Button
          label="Copy and adapt"
          icon="content-copy"
          href={`/tables/new?from=${table.slug}`}
        />
        {may("changeTable", table.ownedByMe) ? <TableSettings table={table} /> : null}
        {may("deleteTable", table.ownedByMe) ? <Delete table={table} /> : null}
      </View>
    </View>
  );
}

/** Rows with the reason of each, and whether a person gave it. */
function Reasons({ rows }: { rows: Table["rows"] }) {
  return (
    <View role="list" style={styles.stackSmall}>
      {rows.map(({ number, reason, proposed }) => (
        <View key={number} role="listitem">
          <Dense>
            <Mono>{number}</Mono>
            {reason ? `: ${reason}` : ": hidden until your second reading is stored"}
            {proposed ? "" : " (chosen by hand)"}
          </Dense>
        </View>
      ))}
    </View>
  );
}

function Delete({ table }: { table: Table }) {
  const router = useRouter();
  const [asking, setAsking] = useState(false);
  const [failure, setFailure] = useState<string | null>(null);
  const [remove, { loading }] = useMutation(DeleteTableDocument, {
    // The list of tables is asked anew when it is next shown.
    update: (cache) => void cache.evict({ id: "ROOT_QUERY", fieldName: "fittingTables" }),
  });
  async function confirm() {
    setAsking(false);
    try {
      const { data } = await remove({ variables: { slug: table.slug } });
      const result = data?.deleteTable;
      if (result?.__typename === "Done") router.replace("/tables");
      else setFailure(result?.message ?? "The table was not deleted. Try again.");
    } catch (error) {
      setFailure(userMessage(error));
    }
  }
  return (
    <>
      <Button
        label="Delete"
        kind="return"
        icon="delete-outline"
        busy={loading}
        onPress={() => setAsking(true)}
      />
      {failure ? <Notice grade="error">{failure}</Notice> : null}
      <Confirm
        visible={asking}
        title="Delete this table?"
        text="Its address stops answering, also for those who cited it. This can't be undone."
        confirmLabel="Delete the table"
        onConfirm={() => void confirm()}
        onCancel={() => setAsking(false)}
      />
    </>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.l },
  columns: { flexDirection: "row", gap: space.l, alignItems: "flex-start" },
  stack: { gap: space.l },
  stackSmall: { gap: space.s },
  main: { flex: 1, minWidth: 0 },
  side: { width: 400 },
  buttons: { flexDirection: "row", flexWrap: "wrap", gap: space.s },
  digest: { fontSize: 13, lineHeight: 20 },
  methods: { fontSize: 13, lineHeight: 20 },
});
