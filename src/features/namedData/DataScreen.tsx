import { useQuery } from "@apollo/client/react";
import { useLocalSearchParams, useRouter } from "expo-router";
import { useEffect, useState } from "react";
import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Choice } from "@/components/Choice";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Field } from "@/components/Field";
import { ListRow } from "@/components/ListRow";
import { Caption, Dense } from "@/components/Text";
import { Screen } from "@/layout/Screen";
import { useLayoutClass } from "@/layout/useLayoutClass";
import { space } from "@/theme/tokens";
import { NamedDataListDocument, type NamedDataListQuery } from "~graphql/generated/graphql";
import { DATA_KINDS, DATA_KIND_WORDS } from "~shared/dependence/namedData";

type Entry = NamedDataListQuery["namedDataList"][number];

const SEARCH_DELAY_MS = 300;

/** Sightlines, fields and samples that approved constraints name; what is asked stands in the address. */
export function DataScreen() {
  const params = useLocalSearchParams<{ q?: string; kind?: string }>();
  const router = useRouter();
  const kept = params.q ?? "";
  const kind = DATA_KINDS.find((word) => word === params.kind) ?? null;
  const [typed, setTyped] = useState(kept);
  useEffect(() => {
    if (typed.trim() === kept) return undefined;
    const timer = setTimeout(
      () => router.setParams({ q: typed.trim() || undefined }),
      SEARCH_DELAY_MS,
    );
    return () => clearTimeout(timer);
  }, [typed, kept, router]);
  const { data, previousData, loading, error, refetch } = useQuery(NamedDataListDocument, {
    variables: { text: kept, kind },
    fetchPolicy: "cache-and-network",
  });
  const phone = useLayoutClass() === "compact";
  const entries = (data ?? previousData)?.namedDataList;
  return (
    <Screen
      title="Sightlines, fields and samples"
      subtitle="The data behind the constraints"
      back="/constraints"
    >
      <View style={styles.all}>
        <View style={phone ? styles.stack : styles.tools}>
          <View style={styles.grow}>
            <Field
              name="search"
              label="Search by name or alias"
              value={typed}
              onChangeText={setTyped}
              inputMode="search"
              autoComplete="off"
              maxLength={200}
            />
          </View>
          <View style={phone ? undefined : styles.kind}>
            <Choice
              label="Kind"
              value={kind}
              placeholder="Any kind"
              options={DATA_KINDS.map((value) => ({ value, label: DATA_KIND_WORDS[value] }))}
              onChange={(value) => router.setParams({ kind: value ?? undefined })}
            />
          </View>
        </View>
        {error && !entries ? (
          <Failed error={error} onRetry={() => void refetch()} />
        ) : !entries ? (
          loading ? (
            <Loading label="Fetching the names" rows={6} />
          ) : null
        ) : entries.length === 0 ? (
          <Nothing
            asked={kept !== "" || kind !== null}
            onClear={() => {
              setTyped("");
              router.setParams({ q: undefined, kind: undefined });
            }}
          />
        ) : (
          <>
            <Caption muted>
              {entries.length === 1 ? "1 entry" : `${entries.length} entries`}
            </Caption>
            <Card flush>
              <View role="list" aria-label="Sightlines, fields and samples">
                {entries.map((entry, index) => (
                  <ListRow key={entry.slug} href={`/data/${entry.slug}`} first={index === 0}>
                    <Row entry={entry} />
                  </ListRow>
                ))}
              </View>
            </Card>
          </>
        )}
      </View>
    </Screen>
  );
}

function Row({ entry }: { entry: Entry }) {
  const { name, kind, aliases, constraintCount } = entry;
  return (
    <View style={styles.row}>
      <View style={styles.grow}>
        <Dense style={styles.name}>{name}</Dense>
        <Caption muted>
          {DATA_KIND_WORDS[kind]}
          {aliases.length > 0 ? `; also ${aliases.join(", ")}` : ""}
        </Caption>
      </View>
      <Caption>{constraintCount === 1 ? "1 constraint" : `${constraintCount} constraints`}</Caption>
    </View>
  );
}

function Nothing({ asked, onClear }: { asked: boolean; onClear: () => void }) {
  return (
    <Card>
      {asked ? (
        <Empty
          title="No entry has this name"
          text="Search for a part of it, or look at every kind."
          action={<Button kind="tonal" label="Clear the search" onPress={onClear} />}
        />
      ) : (
        <Empty
          title="No sightline, field or sample yet"
          text="What a constraint names appears here once an editor has approved it."
          action={<Button kind="tonal" label="All constraints" href="/constraints" />}
        />
      )}
    </Card>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.m, maxWidth: 860 },
  stack: { gap: space.s },
  tools: { flexDirection: "row", gap: space.s, alignItems: "flex-start" },
  kind: { width: 220 },
  grow: { flex: 1, minWidth: 0 },
  row: { flexDirection: "row", alignItems: "center", gap: space.s },
  name: { fontWeight: "600" },
});
