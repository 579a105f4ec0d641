import { useQuery } from "@apollo/client/react";
import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { Card, Divider } from "@/components/Card";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Press } from "@/components/Press";
import { Caption, Dense, Label, Mono, Section } from "@/components/Text";
import { dateTime } from "@/components/when";
import { space } from "@/theme/tokens";
import { TableChangesDocument, type TableBySlugQuery } from "~graphql/generated/graphql";

type Table = NonNullable<TableBySlugQuery["fittingTable"]>;

function sourceWords(release: number | null | undefined): string {
  return release === null || release === undefined
    ? "over the latest records of its day"
    : `over release ${release}`;
}

/** Every version of a table, newest first. */
export function TableVersions({ table }: { table: Table }) {
  if (table.versions.length < 2) return null;
  return (
    <View style={styles.all}>
      <Section>Versions</Section>
      <Card flush>
        <View role="list" aria-label="Versions">
          {table.versions.map((one, index) => (
            <View key={one.version} role="listitem">
              {index > 0 ? <Divider /> : null}
              <Press
                href={`/tables/${table.slug}${index === 0 ? "" : `?version=${one.version}`}`}
                style={styles.row}
              >
                <Label>{`Version ${one.version}${one.version === table.version ? ", shown" : ""}`}</Label>
                <Caption muted>
                  {`${one.rowsIn} rows in, ${one.rowsOut} out · ${sourceWords(one.release)} · ${dateTime(one.createdAt)} · digest `}
                  <Mono>{one.digest.slice(0, 12)}</Mono>
                </Caption>
              </Press>
            </View>
          ))}
        </View>
      </Card>
    </View>
  );
}

/** What the newest release, or the records of now, would make of the table; it never changes by itself. */
export function TableWouldChange({ table }: { table: Table }) {
  const { data, error, loading, refetch } = useQuery(TableChangesDocument, {
    variables: { slug: table.slug },
    fetchPolicy: "cache-and-network",
  });
  const changes = data?.tableChanges;
  const against =
    changes?.release === null || changes?.release === undefined
      ? "the records of now"
      : `release ${changes.release}`;
  return (
    <View style={styles.all}>
      <Section>What would change</Section>
      {error && !changes ? (
        <Failed error={error} onRetry={() => void refetch()} />
      ) : !changes ? (
        loading ? (
          <Loading label="Comparing with the registry" rows={2} />
        ) : (
          <Dense muted>The source of this table can&apos;t be read at this moment.</Dense>
        )
      ) : changes.rows.length === 0 && changes.open === 0 ? (
        <Dense>{`Nothing: ${against} would give the same table.`}</Dense>
      ) : (
        <>
          <Dense>{`Under ${against}, with the same choices:`}</Dense>
          <View role="list" style={styles.list}>
            {changes.rows.map(({ number, words }) => (
              <View key={number} role="listitem">
                <Dense>
                  <Mono>{number}</Mono>
                  {`: ${words}`}
                </Dense>
              </View>
            ))}
          </View>
          {changes.open > 0 ? (
            <Dense>
              {changes.open === 1
                ? "One decision would be open."
                : `${changes.open} decisions would be open.`}
            </Dense>
          ) : null}
          <Numbers changes={changes} />
          {table.ownedByMe ? (
            <View style={styles.buttons}>
              <Button
                label="Begin a new version"
                kind="tonal"
                icon="source-branch"
                href={`/tables/new?from=${table.slug}&as=version`}
              />
            </View>
          ) : null}
        </>
      )}
    </View>
  );
}

function Numbers({
  changes: { midpoint, midpointThen, opticalDepth, opticalDepthThen },
}: {
  changes: {
    midpoint?: number | null;
    midpointThen?: number | null;
    opticalDepth?: number | null;
    opticalDepthThen?: number | null;
  };
}) {
  if (
    typeof midpoint !== "number" ||
    typeof midpointThen !== "number" ||
    typeof opticalDepth !== "number" ||
    typeof opticalDepthThen !== "number"
  ) {
    return null;
  }
  return (
    <Dense>
      {`The tanh history that fits best would move its midpoint from ${midpointThen.toFixed(2)} to ${midpoint.toFixed(2)} and its optical depth from ${opticalDepthThen.toFixed(4)} to ${opticalDepth.toFixed(4)}.`}
    </Dense>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.s },
  list: { gap: space.xs },
  row: { paddingHorizontal: space.m, paddingVertical: space.s, gap: 2, minHeight: 56 },
  buttons: { flexDirection: "row", flexWrap: "wrap", gap: space.s },
});
