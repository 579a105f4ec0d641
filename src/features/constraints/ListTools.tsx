import { useEffect, useState } from "react";
import { StyleSheet, View } from "react-native";

import { Button, IconButton } from "@/components/Button";
import { Choice } from "@/components/Choice";
import { FilterPanel } from "@/components/filter/FilterPanel";
import { Field } from "@/components/Field";
import { Sheet } from "@/components/Sheet";
import { Caption } from "@/components/Text";
import { space } from "@/theme/tokens";
import type { useAddressFilter } from "@/components/filter/useAddressFilter";
import { filterWords } from "~shared/filter/describe";
import { CONSTRAINT_SORTS, SORT_WORDS, type ConstraintSort } from "~shared/filter/filter";

type AddressFilter = ReturnType<typeof useAddressFilter>;

/** The search text, put into the address when typing rests. */
export function SearchField({ address }: { address: AddressFilter }) {
  const { filter, setFilter } = address;
  const kept = filter.text ?? "";
  const [text, setText] = useState(kept);
  const [seen, setSeen] = useState(kept);
  const [sent, setSent] = useState<string | null>(null);
  if (seen !== kept) {
    setSeen(kept);
    // What was typed after it was sent must not be undone by its own arrival in the address.
    if (kept !== sent) setText(kept);
  }
  function send() {
    setSent(text.trim());
    setFilter({ ...filter, text });
  }
  useEffect(() => {
    if (text.trim() === kept) return undefined;
    const timer = setTimeout(send, 350);
    return () => clearTimeout(timer);
    // Only typing starts the clock; a filter set elsewhere must not send an old text.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [text]);
  return (
    <Field
      label="Search"
      value={text}
      onChangeText={setText}
      inputMode="search"
      maxLength={200}
      onSubmit={send}
    />
  );
}

export function SortChoice({ address }: { address: AddressFilter }) {
  return (
    <Choice
      label="Order"
      value={address.sort ?? "redshift"}
      options={CONSTRAINT_SORTS.map((value) => ({ value, label: SORT_WORDS[value] }))}
      onChange={(value) => address.setSort(value as ConstraintSort | null)}
    />
  );
}

/** Filter behind a button, where the page has no room for it beside the list. */
export function FilterButton({ address }: { address: AddressFilter }) {
  const [open, setOpen] = useState(false);
  return (
    <>
      <Button label="Filter" icon="tune-variant" onPress={() => setOpen(true)} />
      <Sheet
        visible={open}
        title="Filter"
        onClose={() => setOpen(false)}
        footer={<Button label="Show the list" kind="filled" onPress={() => setOpen(false)} />}
      >
        <SortChoice address={address} />
        <FilterPanel filter={address.filter} onChange={address.setFilter} />
      </Sheet>
    </>
  );
}

/** What is listed, in words and numbers. */
export function ListLine({
  address,
  total,
  of,
}: {
  address: AddressFilter;
  total: number;
  of: number;
}) {
  return (
    <Caption muted>
      {total} of {of} · {filterWords(address.filter)}
    </Caption>
  );
}

export const PAGE_SIZE = 25;

export function Pages({ address, total }: { address: AddressFilter; total: number }) {
  const pages = Math.max(1, Math.ceil(total / PAGE_SIZE));
  if (pages === 1) return null;
  const { page, setPage } = address;
  return (
    <View style={styles.pages} role="navigation" aria-label="Pages of the list">
      {page > 1 ? (
        <IconButton icon="chevron-left" label="Previous page" onPress={() => setPage(page - 1)} />
      ) : null}
      <Caption>
        Page {Math.min(page, pages)} of {pages}
      </Caption>
      {page < pages ? (
        <IconButton icon="chevron-right" label="Next page" onPress={() => setPage(page + 1)} />
      ) : null}
    </View>
  );
}

/** The list as files, without an account. */
export function ListDownloads({ query }: { query: string }) {
  return (
    <View style={styles.downloads}>
      <Button label="CSV" icon="tray-arrow-down" href={`/api/constraints.csv${query}`} />
      <Button label=".bib" icon="tray-arrow-down" href={`/api/constraints.bib${query}`} />
    </View>
  );
}

const styles = StyleSheet.create({
  pages: { flexDirection: "row", alignItems: "center", justifyContent: "center", gap: space.s },
  downloads: { flexDirection: "row", flexWrap: "wrap", gap: space.xs },
});
