import { useState } from "react";
import { ScrollView, StyleSheet, View } from "react-native";
import { Button } from "@/components/Button";
import { Chip } from "@/components/Chip";
import { FamilyChip } from "@/components/FamilyChip";
import { FilterPanel } from "@/components/filter/FilterPanel";
import { Segments } from "@/components/Segments";
import { Sheet } from "@/components/Sheet";
import { Dense } from "@/components/Text";
import { space } from "@/theme/tokens";
import type { CanonicalFilter, ConstraintFilter } from "~shared/filter/filter";
import { METHOD_FAMILIES, type MethodFamily } from "~shared/methods/vocabulary";
import {
  KIND_WORDS,
  QUANTITY_WORDS,
  tagName,
  VERSION_WORDS,
  WEIGHTING_WORDS,
} from "~shared/statement/words";
import type { View as ChartView } from "./useView";

function rangeWords(from: number | undefined, to: number | undefined): string {
  if (from === undefined) return `up to ${to}`;
  return to === undefined ? `from ${from}` : `${from}–${to}`;
}

/** Parts of the filter in force, each with the filter that is left without it. */
function activeParts(filter: CanonicalFilter): { words: string; without: ConstraintFilter }[] {
  const parts: { words: string; without: ConstraintFilter }[] = [];
  const add = (words: string, part: ConstraintFilter) =>
    parts.push({ words, without: { ...filter, ...part } });
  if (filter.text) add(`“${filter.text}”`, { text: null });
  if (filter.zFrom !== undefined || filter.zTo !== undefined) {
    add(`Redshift ${rangeWords(filter.zFrom, filter.zTo)}`, { zFrom: null, zTo: null });
  }
  if (filter.tags) add(filter.tags.map(tagName).join(" or "), { tags: [] });
  if (filter.quantities) {
    add(filter.quantities.map((word) => QUANTITY_WORDS[word]).join(" or "), { quantities: [] });
  }
  if (filter.kinds) add(filter.kinds.map((word) => KIND_WORDS[word]).join(" or "), { kinds: [] });
  if (filter.weightings) {
    add(filter.weightings.map((word) => WEIGHTING_WORDS[word]).join(" or "), { weightings: [] });
  }
  if (filter.versions) {
    add(filter.versions.map((word) => VERSION_WORDS[word]).join(" or "), { versions: [] });
  }
  if (filter.yearFrom !== undefined || filter.yearTo !== undefined) {
    add(`Published ${rangeWords(filter.yearFrom, filter.yearTo)}`, {
      yearFrom: null,
      yearTo: null,
    });
  }
  return parts;
}

/** Filters over the chart: what is in force as chips, all of it in a sheet; on a phone the families too. */
export function FilterBar({
  filter,
  setFilter,
  view,
  counts,
  onToggleFamily,
  phone,
  wide,
}: {
  filter: CanonicalFilter;
  setFilter: (filter: ConstraintFilter) => void;
  view: ChartView;
  counts: Readonly<Partial<Record<MethodFamily, number>>>;
  onToggleFamily: (family: MethodFamily) => void;
  phone: boolean;
  wide: boolean;
}) {
  const [open, setOpen] = useState(false);
  const active = activeParts(filter);
  const chips = (
    <>
      <Chip label="Filter" icon="tune-variant" expanded={open} onPress={() => setOpen(true)} />
      {active.map(({ words, without }) => (
        <Chip key={words} label={words} onRemove={() => setFilter(without)} />
      ))}
      {wide
        ? null
        : METHOD_FAMILIES.filter(
            (family) => (counts[family] ?? 0) > 0 || filter.families?.includes(family),
          ).map((family) => (
            <FamilyChip
              key={family}
              family={family}
              selected={filter.families?.includes(family) ?? false}
              onPress={() => onToggleFamily(family)}
            />
          ))}
    </>
  );
  return (
    <View style={phone ? styles.phone : styles.bar}>
      {wide ? (
        <View style={styles.chips}>{chips}</View>
      ) : (
        <ScrollView
          horizontal
          showsHorizontalScrollIndicator={false}
          style={styles.scroll}
          contentContainerStyle={[styles.row, phone && styles.rowPhone]}
        >
          {chips}
        </ScrollView>
      )}
      {phone ? null : <AxisChoices view={view} />}
      <Sheet visible={open} title="Filter" onClose={() => setOpen(false)}>
        {phone ? <AxisChoices view={view} stacked /> : null}
        <FilterPanel filter={filter} onChange={setFilter} />
        <Button label="Show the chart" kind="filled" onPress={() => setOpen(false)} />
      </Sheet>
    </View>
  );
}

function AxisChoices({ view, stacked = false }: { view: ChartView; stacked?: boolean }) {
  return (
    <View style={[styles.axes, stacked && styles.axesStacked]}>
      <View style={styles.axis}>
        {stacked ? <Dense muted>Upper axis</Dense> : null}
        <View style={styles.upper}>
          <Segments
            label="Upper axis"
            value={view.upperAxis}
            options={[
              { value: "age", label: "Cosmic age" },
              { value: "frequency", label: "21-cm frequency" },
            ]}
            onChange={(value) => view.setUpperAxis(value === "frequency" ? "frequency" : "age")}
          />
        </View>
      </View>
      <View style={styles.axis}>
        {stacked ? <Dense muted>Fraction axis</Dense> : null}
        <View style={styles.side}>
          <Segments
            label="Fraction axis"
            value={view.logarithmic ? "log" : "linear"}
            options={[
              { value: "linear", label: "Linear" },
              { value: "log", label: "Log" },
            ]}
            onChange={(value) => view.setLogarithmic(value === "log")}
          />
        </View>
      </View>
    </View>
  );
}

const styles = StyleSheet.create({
  bar: {
    flexDirection: "row",
    alignItems: "center",
    justifyContent: "space-between",
    flexWrap: "wrap",
    gap: space.xs,
  },
  phone: { marginHorizontal: -space.m },
  chips: { flexDirection: "row", flexWrap: "wrap", columnGap: space.xs, flexShrink: 1 },
  scroll: { flexGrow: 1, flexShrink: 1, minWidth: 240 },
  row: { flexDirection: "row", gap: space.xs },
  rowPhone: { paddingHorizontal: space.m },
  axes: { flexDirection: "row", gap: space.xs, alignItems: "center" },
  axesStacked: { flexDirection: "column", alignItems: "stretch", gap: space.s },
  axis: { gap: space.xxs },
  upper: { width: 264, maxWidth: "100%" },
  side: { width: 132 },
});
