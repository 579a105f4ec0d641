import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { CheckRow } from "@/components/CheckRow";
import { Chip } from "@/components/Chip";
import { Choice } from "@/components/Choice";
import { FamilyChip } from "@/components/FamilyChip";
import { Field } from "@/components/Field";
import { Label } from "@/components/Text";
import { space } from "@/theme/tokens";
import { isEmptyFilter } from "~shared/filter/address";
import type { CanonicalFilter, ConstraintFilter } from "~shared/filter/filter";
import { useMethodTags } from "@/components/useMethodTags";
import { METHOD_FAMILIES } from "~shared/methods/vocabulary";
import { RECORD_STATES, type RecordState } from "~shared/review/states";
import {
  QUANTITIES,
  STATEMENT_KINDS,
  VERSIONS_READ,
  WEIGHTINGS,
  type Quantity,
} from "~shared/statement/fields";
import {
  KIND_WORDS,
  QUANTITY_WORDS,
  VERSION_WORDS,
  WEIGHTING_WORDS,
} from "~shared/statement/words";

const STATE_WORDS: Record<RecordState, string> = {
  current: "Current",
  superseded: "Superseded",
  withdrawn: "Withdrawn",
};

/** The list with or without one word. */
function toggled<T>(list: readonly T[] | undefined, word: T): T[] {
  return list?.includes(word) ? list.filter((other) => other !== word) : [...(list ?? []), word];
}

/** A number field that hands its number over when it can be read, so that typing never jumps. */
function NumberField({
  label,
  value,
  whole = false,
  onChange,
}: {
  label: string;
  value: number | undefined;
  whole?: boolean;
  onChange: (value: number | undefined) => void;
}) {
  const [text, setText] = useState(value === undefined ? "" : String(value));
  // A filter that changed elsewhere replaces what stands here; the same number keeps its spelling.
  const [shown, setShown] = useState(value);
  if (shown !== value) {
    setShown(value);
    const same = text.trim() === "" ? value === undefined : Number(text) === value;
    if (!same) setText(value === undefined ? "" : String(value));
  }
  const number = Number(text.replace(",", "."));
  const readable =
    text.trim() === "" ||
    (Number.isFinite(number) && number >= 0 && (!whole || Number.isInteger(number)));
  function commit() {
    if (!readable) return;
    const next = text.trim() === "" ? undefined : number;
    if (next !== value) onChange(next);
  }
  return (
    <View style={styles.half}>
      <Field
        label={label}
        value={text}
        onChangeText={setText}
        onBlur={commit}
        onSubmit={commit}
        numeric
        inputMode={whole ? "numeric" : "decimal"}
        maxLength={8}
        error={readable ? null : whole ? "A year, 2024 say" : "A number, 6.5 say"}
      />
    </View>
  );
}

/** Every part of a filter; a change takes effect at once. */
export function FilterPanel({
  filter,
  onChange,
}: {
  filter: CanonicalFilter;
  onChange: (filter: ConstraintFilter) => void;
}) {
  const change = (part: ConstraintFilter) => onChange({ ...filter, ...part });
  const tags = useMethodTags().filter(
    ({ family, tag }) => filter.families?.includes(family) || filter.tags?.includes(tag),
  );
  return (
    <View style={styles.all}>
      <View role="group" aria-label="Method families" style={styles.group}>
        <Label>Method families</Label>
        <View style={styles.chips}>
          {METHOD_FAMILIES.map((family) => (
            <FamilyChip
              key={family}
              family={family}
              selected={filter.families?.includes(family) ?? false}
              onPress={() => change({ families: toggled(filter.families, family) })}
            />
          ))}
        </View>
      </View>
      <View style={styles.clear}>
        <Button
          label="What the methods mean"
          kind="text"
          icon="help-circle-outline"
          href="/methods"
        />
      </View>
      {tags.length > 1 ? (
        <View role="group" aria-label="Methods">
          <Label>Methods</Label>
          {tags.map(({ tag, name }) => (
            <CheckRow
              key={tag}
              label={name}
              checked={filter.tags?.includes(tag) ?? false}
              onChange={() => change({ tags: toggled(filter.tags, tag) })}
            />
          ))}
        </View>
      ) : null}
      <View style={styles.pair}>
        <NumberField
          label="Redshift from"
          value={filter.zFrom}
          onChange={(zFrom) => change({ zFrom })}
        />
        <NumberField label="to" value={filter.zTo} onChange={(zTo) => change({ zTo })} />
      </View>
      <Choice
        label="Quantity"
        value={filter.quantities?.[0] ?? null}
        placeholder="Any quantity"
        options={QUANTITIES.map((value) => ({ value, label: QUANTITY_WORDS[value] }))}
        onChange={(value) => change({ quantities: value ? [value as Quantity] : [] })}
      />
      <View role="group" aria-label="Statement" style={styles.group}>
        <Label>Statement</Label>
        <View style={styles.chips}>
          {STATEMENT_KINDS.map((kind) => (
            <Chip
              key={kind}
              label={KIND_WORDS[kind]}
              selected={filter.kinds?.includes(kind) ?? false}
              onPress={() => change({ kinds: toggled(filter.kinds, kind) })}
            />
          ))}
        </View>
      </View>
      <View style={styles.pair}>
        <NumberField
          label="Published from"
          whole
          value={filter.yearFrom}
          onChange={(yearFrom) => change({ yearFrom })}
        />
        <NumberField
          label="to"
          whole
          value={filter.yearTo}
          onChange={(yearTo) => change({ yearTo })}
        />
      </View>
      <View role="group" aria-label="Weighting" style={styles.group}>
        <Label>Weighting</Label>
        <View style={styles.chips}>
          {WEIGHTINGS.map((weighting) => (
            <Chip
              key={weighting}
              label={WEIGHTING_WORDS[weighting]}
              selected={filter.weightings?.includes(weighting) ?? false}
              onPress={() => change({ weightings: toggled(filter.weightings, weighting) })}
            />
          ))}
        </View>
      </View>
      <View role="group" aria-label="Version read" style={styles.group}>
        <Label>Version read</Label>
        <View style={styles.chips}>
          {VERSIONS_READ.map((version) => (
            <Chip
              key={version}
              label={VERSION_WORDS[version]}
              selected={filter.versions?.includes(version) ?? false}
              onPress={() => change({ versions: toggled(filter.versions, version) })}
            />
          ))}
        </View>
      </View>
      <View role="group" aria-label="State of the record" style={styles.group}>
        <Label>State of the record</Label>
        <View style={styles.chips}>
          {RECORD_STATES.map((state) => (
            <Chip
              key={state}
              label={STATE_WORDS[state]}
              selected={filter.states?.includes(state) ?? false}
              onPress={() => change({ states: toggled(filter.states, state) })}
            />
          ))}
        </View>
      </View>
      {isEmptyFilter(filter) ? null : (
        <View style={styles.clear}>
          <Button label="Clear the filter" kind="tonal" icon="close" onPress={() => onChange({})} />
        </View>
      )}
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.m },
  group: { gap: space.xxs },
  chips: { flexDirection: "row", flexWrap: "wrap", columnGap: space.xs },
  pair: { flexDirection: "row", gap: space.s },
  half: { flex: 1, minWidth: 0 },
  clear: { alignItems: "flex-start" },
});
