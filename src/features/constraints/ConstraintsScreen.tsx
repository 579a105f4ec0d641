import { useQuery } from "@apollo/client/react";
import { useRouter } from "expo-router";
import { StyleSheet, View } from "react-native";

import { filterInput } from "@/apollo/filterInput";
import { useLatest } from "@/apollo/useLatest";
import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { DataTable } from "@/components/DataTable";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { FilterPanel } from "@/components/filter/FilterPanel";
import { useAddressFilter } from "@/components/filter/useAddressFilter";
import { Marker } from "@/components/Marker";
import { Dense, Mono, Section } from "@/components/Text";
import { Screen } from "@/layout/Screen";
import { useLayoutClass } from "@/layout/useLayoutClass";
import { space } from "@/theme/tokens";
import { ConstraintListDocument } from "~graphql/generated/graphql";
import { isEmptyFilter } from "~shared/filter/address";
import { familyOf } from "~shared/methods/vocabulary";
import { hasBestValue } from "~shared/statement/relevant";
import { levelPhrase } from "~shared/statement/words";

import {
  ConstraintRows,
  RowNotation,
  RowState,
  Whereabouts,
  type ListedConstraint,
} from "./ConstraintRows";
import {
  FilterButton,
  ListDownloads,
  ListLine,
  PAGE_SIZE,
  Pages,
  SearchField,
  SortChoice,
} from "./ListTools";

/** The registry as a list: search, filter and order stand in the address. */
export function ConstraintsScreen() {
  const address = useAddressFilter();
  const layout = useLayoutClass();
  const { data, error, loading, refetch } = useQuery(ConstraintListDocument, {
    variables: {
      filter: filterInput(address.filter),
      sort: address.sort ?? "redshift",
      offset: (address.page - 1) * PAGE_SIZE,
      limit: PAGE_SIZE,
    },
  });
  const page = useLatest(data)?.constraints;
  const wide = layout === "wide";
  return (
    <Screen
      title="Constraints"
      subtitle={
        page ? <ListLine address={address} total={page.total} of={page.registryTotal} /> : undefined
      }
      actions={wide ? <ListDownloads query={address.query} /> : undefined}
      aside={
        wide ? (
          <View style={styles.aside}>
            <Section>Filter</Section>
            <FilterPanel filter={address.filter} onChange={address.setFilter} />
            <NamesLink />
          </View>
        ) : undefined
      }
    >
      <View style={styles.all}>
        <View style={layout === "compact" ? styles.toolsPhone : styles.tools}>
          <View style={styles.search}>
            <SearchField address={address} />
          </View>
          {wide ? (
            <View style={styles.sort}>
              <SortChoice address={address} />
            </View>
          ) : (
            <View style={styles.buttons}>
              <FilterButton address={address} />
              <ListDownloads query={address.query} />
              <NamesLink />
            </View>
          )}
        </View>
        {error && !page ? (
          <Failed error={error} onRetry={() => void refetch()} />
        ) : !page ? (
          loading ? (
            <Loading label="Fetching the constraints" rows={6} />
          ) : null
        ) : page.constraints.length === 0 ? (
          <Card>
            <Empty
              title={page.registryTotal === 0 ? "No constraint yet" : "No row matches"}
              text={
                page.registryTotal === 0
                  ? "The registry is empty. What contributors submit appears here once an editor has approved it."
                  : `${page.registryTotal} constraints are in the registry. Widen the redshift or clear the families.`
              }
              action={
                isEmptyFilter(address.filter) ? undefined : (
                  <Button
                    label="Clear the filter"
                    kind="tonal"
                    onPress={() => address.setFilter({})}
                  />
                )
              }
            />
          </Card>
        ) : (
          <>
            <Card flush>
              {wide ? (
                <WideTable constraints={page.constraints} query={address.query} />
              ) : (
                <ConstraintRows constraints={page.constraints} query={address.query} />
              )}
            </Card>
            <Pages address={address} total={page.total} />
          </>
        )}
      </View>
    </Screen>
  );
}

function NamesLink() {
  return (
    <Button
      label="Sightlines, fields, samples"
      icon="map-marker-outline"
      kind="text"
      href="/data"
    />
  );
}

function WideTable({
  constraints,
  query,
}: {
  constraints: readonly ListedConstraint[];
  query: string;
}) {
  const router = useRouter();
  return (
    <DataTable
      caption="Constraints"
      columns={[
        { key: "source", title: "Source" },
        { key: "where", title: "Redshift or quantity" },
        { key: "value", title: "As used" },
        { key: "level", title: "Level" },
        { key: "year", title: "Year", align: "right" },
        { key: "number", title: "Record", align: "right" },
      ]}
      rows={constraints.map(({ number, fields, citation, state, supersededBy }) => {
        const family = familyOf(fields.methodTags);
        return {
          id: number,
          number: <Mono>{number}</Mono>,
          source: (
            <View style={styles.source}>
              {family ? (
                <Marker family={family} hollow={!hasBestValue(fields.kind)} size={18} />
              ) : null}
              <View>
                <Dense>{citation.shortName}</Dense>
                <RowState state={state} supersededBy={supersededBy} />
              </View>
            </View>
          ),
          where: <Whereabouts fields={fields} />,
          value:
            fields.kind === "qualitative" ? (
              <Dense muted>qualitative</Dense>
            ) : (
              <RowNotation fields={fields} />
            ),
          level: <Dense>{levelPhrase(fields.level, fields.levelPercent)}</Dense>,
          year: <Mono>{citation.year ?? ""}</Mono>,
        };
      })}
      rowKey={({ id }) => id}
      onRowPress={({ id }) => router.push(`/constraints/${id}${query}` as never)}
    />
  );
}

const styles = StyleSheet.create({
  all: { gap: space.m },
  aside: { gap: space.m, padding: space.l },
  tools: { flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: space.s },
  toolsPhone: { gap: space.s },
  buttons: { flexDirection: "row", flexWrap: "wrap", gap: space.xs },
  search: { flexGrow: 1, flexShrink: 1, flexBasis: "auto", minWidth: 240 },
  sort: { width: 240 },
  source: { flexDirection: "row", alignItems: "center", gap: space.s },
});
