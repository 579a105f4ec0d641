import { useQuery } from "@apollo/client/react";
import { useLocalSearchParams } from "expo-router";
import { ScrollView, StyleSheet, View } from "react-native";

import { filterInput } from "@/apollo/filterInput";
import { useLatest } from "@/apollo/useLatest";
import { Button } from "@/components/Button";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { useAddressFilter } from "@/components/filter/useAddressFilter";
import { Section } from "@/components/Text";
import { Screen } from "@/layout/Screen";
import { useLayoutClass } from "@/layout/useLayoutClass";
import { space } from "@/theme/tokens";
import { ConstraintByNumberDocument, ConstraintListDocument } from "~graphql/generated/graphql";

import { ConstraintRows } from "./ConstraintRows";
import { FilterButton, ListLine, SearchField } from "./ListTools";
import { RecordView } from "./RecordView";

/** One record; on a wide screen the list it came from stays beside it. */
export function ConstraintScreen() {
  const { number } = useLocalSearchParams<{ number: string }>();
  const address = useAddressFilter();
  const wide = useLayoutClass() === "wide";
  const { data, error, loading, refetch } = useQuery(ConstraintByNumberDocument, {
    variables: { number },
  });
  const record = data?.constraint;
  return (
    <Screen
      title="Constraint"
      documentTitle={number}
      back={`/constraints${address.query}`}
      list={wide ? <SideList current={number} /> : undefined}
    >
      {record ? (
        <RecordView key={record.number} record={record} />
      ) : error ? (
        <Failed error={error} onRetry={() => void refetch()} />
      ) : loading ? (
        <Loading label={`Fetching ${number}`} rows={5} />
      ) : (
        <Empty
          title={`No record ${number}`}
          text="No approved record has this number. It may still be a draft, or be in review."
          action={<Button label="All constraints" kind="tonal" href="/constraints" />}
        />
      )}
    </Screen>
  );
}

function SideList({ current }: { current: string }) {
  const address = useAddressFilter();
  const { data } = useQuery(ConstraintListDocument, {
    variables: {
      filter: filterInput(address.filter),
      sort: address.sort ?? "redshift",
      offset: 0,
      limit: 200,
    },
  });
  const page = useLatest(data)?.constraints;
  return (
    <View style={styles.side}>
      <View style={styles.tools}>
        <Section level={2}>Constraints</Section>
        <SearchField address={address} />
        <FilterButton address={address} />
        {page ? <ListLine address={address} total={page.total} of={page.registryTotal} /> : null}
      </View>
      <ScrollView style={styles.scroll}>
        {page ? (
          <ConstraintRows constraints={page.constraints} query={address.query} current={current} />
        ) : null}
      </ScrollView>
    </View>
  );
}

const styles = StyleSheet.create({
  side: { flex: 1, minHeight: 0 },
  tools: { padding: space.m, gap: space.s },
  scroll: { flex: 1 },
});
