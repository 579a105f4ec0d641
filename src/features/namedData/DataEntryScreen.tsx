import { useQuery } from "@apollo/client/react";
import { useLocalSearchParams } from "expo-router";
import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { DefinitionList } from "@/components/DefinitionList";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { ListRow } from "@/components/ListRow";
import { NotationText } from "@/components/NotationText";
import { StatusPill } from "@/components/StatusPill";
import { Caption, Dense, Mono, Section } from "@/components/Text";
import { Screen } from "@/layout/Screen";
import { useLayoutClass } from "@/layout/useLayoutClass";
import { space } from "@/theme/tokens";
import {
  NamedDataBySlugDocument,
  type DataLinkPartsFragment,
  type NamedDataBySlugQuery,
} from "~graphql/generated/graphql";
import { DATA_KIND_WORDS } from "~shared/dependence/namedData";
import { notationAsPrinted } from "~shared/statement/notation";

import { DataEditSheet } from "./DataEditSheet";
import { DataRelateSheet } from "./DataRelateSheet";

type Entry = NonNullable<NamedDataBySlugQuery["namedData"]>;

/** One sightline, field or sample: what it is, its other names, its relations, who uses it. */
export function DataEntryScreen() {
  const { slug } = useLocalSearchParams<{ slug: string }>();
  const { data, error, loading, refetch } = useQuery(NamedDataBySlugDocument, {
    variables: { slug },
    fetchPolicy: "cache-and-network",
  });
  const entry = data?.namedData;
  return (
    <Screen
      title={entry?.name ?? "Sightline, field or sample"}
      subtitle={entry ? DATA_KIND_WORDS[entry.kind] : undefined}
      back="/data"
    >
      {entry ? (
        <EntryView key={entry.slug} entry={entry} onChanged={() => void refetch()} />
      ) : error ? (
        <Failed error={error} onRetry={() => void refetch()} />
      ) : loading ? (
        <Loading label="Fetching the entry" rows={4} />
      ) : (
        <Empty
          title="No entry at this address"
          text="No approved constraint names it. The address may be cut short."
          action={<Button label="All names" kind="tonal" href="/data" />}
        />
      )}
    </Screen>
  );
}

function EntryView({ entry, onChanged }: { entry: Entry; onChanged: () => void }) {
  const wide = useLayoutClass() === "wide";
  const mayKeep = useSession().may("keepNamedData");
  const [editing, setEditing] = useState(false);
  const [relating, setRelating] = useState(false);
  return (
    <View style={styles.all}>
      <View style={wide ? styles.columns : styles.all}>
        <View style={[styles.part, wide && styles.column]}>
          <Card>
            <DefinitionList items={factsOf(entry)} />
          </Card>
          {mayKeep ? (
            <View style={styles.buttons}>
              <Button
                label="Edit"
                kind="filled"
                icon="pencil-outline"
                onPress={() => setEditing(true)}
              />
              <Button
                label="Relations and merging"
                kind="outline"
                icon="source-branch"
                onPress={() => setRelating(true)}
              />
            </View>
          ) : null}
        </View>
        <View style={[styles.part, wide && styles.column]}>
          <Section>Relations</Section>
          <Links title="Part of" links={entry.subsetOf} />
          <Links title="Contains" links={entry.contains} />
          <Links title="Overlaps with" links={entry.overlaps} />
          {entry.subsetOf.length + entry.contains.length + entry.overlaps.length === 0 ? (
            <Dense muted>
              None on record. That two names have no relation is not known from this.
            </Dense>
          ) : null}
        </View>
      </View>
      <View style={styles.part}>
        <Section>
          {entry.constraints.length === 1
            ? "1 constraint uses it"
            : `${entry.constraints.length} constraints use it`}
        </Section>
        {entry.constraints.length === 0 ? (
          <Dense muted>No approved constraint names it now.</Dense>
        ) : (
          <Card flush>
            <View role="list" aria-label="Constraints that use it">
              {entry.constraints.map((record, index) => (
                <ListRow
                  key={record.number}
                  href={`/constraints/${record.number}`}
                  first={index === 0}
                >
                  <View style={styles.row}>
                    <View style={styles.grow}>
                      <View style={styles.line}>
                        <Mono style={styles.number}>{record.number}</Mono>
                        {record.state === "current" ? null : <StatusPill state={record.state} />}
                      </View>
                      <Caption muted>{record.citation.shortName}</Caption>
                    </View>
                    <NotationText notation={notationAsPrinted(record.fields)} tail={false} />
                  </View>
                </ListRow>
              ))}
            </View>
          </Card>
        )}
      </View>
      {mayKeep ? (
        <>
          <DataEditSheet
            key={entry.version}
            visible={editing}
            entry={entry}
            onClose={() => setEditing(false)}
            onDone={() => {
              setEditing(false);
              onChanged();
            }}
          />
          <DataRelateSheet
            visible={relating}
            entry={entry}
            onClose={() => setRelating(false)}
            onChanged={onChanged}
          />
        </>
      ) : null}
    </View>
  );
}

function factsOf(entry: Entry) {
  const { ra, dec, sexagesimal, aliases, extent, note } = entry;
  return [
    { term: "Kind", value: DATA_KIND_WORDS[entry.kind] },
    { term: "Other names", value: aliases.length > 0 ? aliases.join("; ") : "None known" },
    ...(ra !== null && dec !== null
      ? [
          { term: "Coordinates, J2000", value: <Mono style={styles.number}>{sexagesimal}</Mono> },
          {
            term: "In degrees",
            value: <Mono style={styles.number}>{`${ra}, ${dec.replace("-", "\u2212")}`}</Mono>,
          },
        ]
      : [{ term: "Coordinates", value: "Not given" }]),
    ...(extent ? [{ term: "Area or extent", value: extent }] : []),
    ...(note ? [{ term: "Note", value: note }] : []),
  ];
}

function Links({ title, links }: { title: string; links: readonly DataLinkPartsFragment[] }) {
  if (links.length === 0) return null;
  return (
    <View>
      <Caption muted>{title}</Caption>
      <View style={styles.buttons}>
        {links.map(({ slug, name }) => (
          <Button key={slug} label={name} kind="text" href={`/data/${slug}`} />
        ))}
      </View>
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.l },
  columns: { flexDirection: "row", gap: space.xl, alignItems: "flex-start" },
  column: { flex: 1, minWidth: 0 },
  part: { gap: space.s },
  buttons: { flexDirection: "row", flexWrap: "wrap", gap: space.xs },
  row: { flexDirection: "row", alignItems: "center", gap: space.s },
  line: { flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: space.xs },
  grow: { flex: 1, minWidth: 0 },
  number: { fontSize: 14 },
});
