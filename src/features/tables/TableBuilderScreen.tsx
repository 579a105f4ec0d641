import { useMutation, useQuery } from "@apollo/client/react";
import { useLocalSearchParams, useRouter } from "expo-router";
import { useMemo, useState } from "react";
import { StyleSheet, View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { useSession } from "@/apollo/useSession";
import { filterInput } from "@/apollo/filterInput";
import { useLatest } from "@/apollo/useLatest";
import { Button } from "@/components/Button";
import { Card, Divider } from "@/components/Card";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Field } from "@/components/Field";
import { FilterPanel } from "@/components/filter/FilterPanel";
import { useAddressFilter } from "@/components/filter/useAddressFilter";
import { Notice } from "@/components/Notice";
import { Sheet } from "@/components/Sheet";
import { Caption, Dense, Section } from "@/components/Text";
import { Screen } from "@/layout/Screen";
import { useLayoutClass } from "@/layout/useLayoutClass";
import { space } from "@/theme/tokens";
import { SaveTableDocument, TableCandidatesDocument } from "~graphql/generated/graphql";
import { isEmptyFilter } from "~shared/filter/address";
import { filterWords } from "~shared/filter/describe";
import { proposeRows } from "~shared/table/proposeRows";

import { BuilderHead, BuilderRow, type BuiltRow } from "./BuilderRow";
import { TableRows } from "./TableRows";
import { useTableDraft } from "./useTableDraft";

/** Filter, rows with their reasons, preview, save. The filter stands in the address. */
export function TableBuilderScreen() {
  const address = useAddressFilter();
  const { with: wanted } = useLocalSearchParams<{ with?: string }>();
  const { draft, setName, choose, clear } = useTableDraft();
  const wide = useLayoutClass() === "wide";
  const [filtering, setFiltering] = useState(false);
  const { data, error, loading, refetch } = useQuery(TableCandidatesDocument, {
    variables: { filter: filterInput(address.filter) },
    fetchPolicy: "cache-and-network",
  });
  const page = useLatest(data)?.constraints;
  const rows = useMemo((): BuiltRow[] => {
    const candidates = page?.constraints ?? [];
    const proposals = proposeRows(
      candidates.map(({ number, fields, citation }) => ({
        number,
        fields,
        citation: citation.id,
        year: citation.year ?? null,
      })),
    );
    return candidates.map((constraint, index) => {
      const proposal = proposals[index];
      const choice = draft.choices[constraint.number];
      const included = choice?.included ?? proposal?.included ?? true;
      return {
        constraint,
        included,
        reason: choice?.reason ?? proposal?.reason ?? "",
        proposedIn: proposal?.included ?? true,
        proposedReason: proposal?.reason ?? null,
        cautions: included ? (proposal?.cautions ?? []) : [],
      };
    });
  }, [page, draft.choices]);
  const taken = rows.filter(({ included }) => included);
  const unreasoned = rows.filter(
    ({ included, proposedIn, reason }) => included !== proposedIn && reason.trim() === "",
  );
  const filter = <FilterPanel filter={address.filter} onChange={address.setFilter} />;
  return (
    <Screen
      title="New table"
      subtitle={
        page
          ? `${page.total} of ${page.registryTotal} match · ${filterWords(address.filter)}`
          : undefined
      }
      back="/tables"
      aside={
        wide ? (
          <View style={styles.aside}>
            <Section>Filter</Section>
            {filter}
          </View>
        ) : undefined
      }
    >
      <View style={styles.all}>
        {wide ? null : (
          <View style={styles.buttons}>
            <Button label="Filter" icon="tune-variant" onPress={() => setFiltering(true)} />
          </View>
        )}
        {error && !page ? (
          <Failed error={error} onRetry={() => void refetch()} />
        ) : !page ? (
          loading ? (
            <Loading label="Fetching the rows" rows={6} />
          ) : null
        ) : (
          <>
            {wanted && !rows.some(({ constraint }) => constraint.number === wanted) ? (
              <Notice
                grade="note"
                action={
                  isEmptyFilter(address.filter) ? undefined : (
                    <Button
                      label="Clear the filter"
                      kind="tonal"
                      onPress={() => address.setFilter({})}
                    />
                  )
                }
              >
                {`${wanted} does not match this filter.`}
              </Notice>
            ) : null}
            <View style={styles.part}>
              <Section>Rows</Section>
              <Caption muted>
                {taken.length} in, {rows.length - taken.length} out. A row against the proposal asks
                for a reason, which every download carries.
              </Caption>
              <Card flush>
                {rows.length === 0 ? (
                  <Empty
                    title="No row matches"
                    text="Widen the redshift or clear the families."
                    action={
                      <Button
                        label="Clear the filter"
                        kind="tonal"
                        onPress={() => address.setFilter({})}
                      />
                    }
                  />
                ) : (
                  <>
                    {wide ? <BuilderHead /> : null}
                    <View role="list" aria-label="Candidates">
                      {rows.map((row, index) => (
                        <View key={row.constraint.number} role="listitem">
                          {index > 0 || wide ? <Divider /> : null}
                          <BuilderRow
                            row={row}
                            wanted={row.constraint.number === wanted}
                            onChoose={(choice) => choose(row.constraint.number, choice)}
                          />
                        </View>
                      ))}
                    </View>
                  </>
                )}
              </Card>
            </View>
            {taken.length > 0 ? (
              <View style={styles.part}>
                <Section>Preview</Section>
                <TableRows constraints={taken.map(({ constraint }) => constraint)} />
              </View>
            ) : null}
            <Save
              name={draft.name}
              onName={setName}
              rows={rows}
              unreasoned={unreasoned.map(({ constraint }) => constraint.number)}
              filter={address.filter}
              onSaved={clear}
            />
          </>
        )}
      </View>
      <Sheet
        visible={filtering}
        title="Filter"
        onClose={() => setFiltering(false)}
        footer={
          <Button
            label={`Show ${page?.total ?? ""} rows`}
            kind="filled"
            onPress={() => setFiltering(false)}
          />
        }
      >
        {filter}
      </Sheet>
    </Screen>
  );
}

function Save({
  name,
  onName,
  rows,
  unreasoned,
  filter,
  onSaved,
}: {
  name: string;
  onName: (name: string) => void;
  rows: readonly BuiltRow[];
  unreasoned: readonly string[];
  filter: ReturnType<typeof useAddressFilter>["filter"];
  onSaved: () => void;
}) {
  const router = useRouter();
  const { viewer } = useSession();
  const [failure, setFailure] = useState<string | null>(null);
  const [save, { loading }] = useMutation(SaveTableDocument, {
    // The list of tables is asked anew when it is next shown.
    update: (cache) => void cache.evict({ id: "ROOT_QUERY", fieldName: "fittingTables" }),
  });
  const because = !viewer
    ? undefined
    : !rows.some(({ included }) => included)
      ? "No row is in."
      : unreasoned.length > 0
        ? `A reason is missing: ${unreasoned.join(", ")}.`
        : name.trim() === ""
          ? "Give the table a name."
          : undefined;
  async function press() {
    setFailure(null);
    try {
      const { data } = await save({
        variables: {
          input: {
            name: name.trim(),
            filter: filterInput(filter),
            rows: rows.map(({ constraint, included, reason }) => ({
              number: constraint.number,
              included,
              reason: reason.trim() === "" ? null : reason.trim(),
            })),
          },
        },
      });
      const result = data?.saveTable;
      if (result?.__typename === "FittingTable") {
        onSaved();
        router.replace(`/tables/${result.slug}` as never);
      } else setFailure(result?.message ?? "The table was not saved. Try again.");
    } catch (error) {
      setFailure(userMessage(error));
    }
  }
  return (
    <View style={styles.part}>
      <Section>Save</Section>
      <Dense muted>
        Saving gives the table a permanent address. Its rows are copied as they stand now, so its
        bytes never change; the choices go along.
      </Dense>
      <Field label="Name of the table" value={name} onChangeText={onName} maxLength={120} />
      {failure ? <Notice grade="error">{failure}</Notice> : null}
      <View style={styles.buttons}>
        {viewer ? (
          <Button
            label="Save the table"
            kind="filled"
            icon="content-save-outline"
            busy={loading}
            disabledBecause={because}
            onPress={() => void press()}
          />
        ) : (
          <Button label="Sign in to save" kind="filled" icon="login" href="/account/sign-in" />
        )}
      </View>
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.l },
  part: { gap: space.s },
  aside: { gap: space.m, padding: space.l },
  buttons: { flexDirection: "row", flexWrap: "wrap", gap: space.s },
});
