import { useQuery } from "@apollo/client/react";
import { useEffect, useId, useState } from "react";
import { StyleSheet, View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { useColors } from "@/theme/ThemeProvider";
import { radius, space, target } from "@/theme/tokens";
import { ConstraintListDocument } from "~graphql/generated/graphql";
import { formatRecordNumber, parseRecordNumber } from "~shared/identifiers/recordNumber";

import { IconButton } from "../Button";
import { Chip } from "../Chip";
import { Field } from "../Field";
import { Press } from "../Press";
import { Caption, Dense, Mono } from "../Text";

const SEARCH_DELAY_MS = 300;
const MOST_FOUND = 6;

/**
 * Records of the registry, each a chip: found by number, author or title while typing; a whole number
 * is taken by Enter or the plus.
 */
export function RecordPicker({
  label,
  values,
  onChange,
  hint,
  error,
  single = false,
}: {
  label: string;
  /** FL-0042 */
  values: readonly string[];
  onChange: (values: string[]) => void;
  hint?: string;
  error?: string | null;
  /** Keeps the last one chosen only. */
  single?: boolean;
}) {
  const [typed, setTyped] = useState("");
  const groupId = useId();
  const number = parseRecordNumber(typed);

  function take(chosen: number | string) {
    const next = typeof chosen === "number" ? formatRecordNumber(chosen) : chosen;
    setTyped("");
    if (!values.includes(next)) onChange(single ? [next] : [...values, next]);
  }

  return (
    <View role="group" aria-labelledby={groupId} style={styles.all}>
      <View style={styles.entry}>
        <View style={styles.field}>
          <Field
            label={label}
            value={typed}
            onChangeText={setTyped}
            onSubmit={() => number !== null && take(number)}
            hint={hint ?? "Number, author or a word of the title"}
            error={error}
            inputMode="search"
            autoComplete="off"
            maxLength={100}
          />
        </View>
        {number === null ? null : (
          <View style={styles.add}>
            <IconButton icon="plus" label={`Add to ${label}`} onPress={() => take(number)} />
          </View>
        )}
      </View>
      <Found typed={typed} values={values} onTake={take} label={label} />
      {values.length > 0 ? (
        <View style={styles.chips}>
          {values.map((value) => (
            <Chip
              key={value}
              label={value}
              onRemove={() => onChange(values.filter((other) => other !== value))}
            />
          ))}
        </View>
      ) : null}
    </View>
  );
}

/** What the registry knows of the typed words; nothing while nothing is typed. */
function Found({
  typed,
  values,
  onTake,
  label,
}: {
  typed: string;
  values: readonly string[];
  onTake: (number: string) => void;
  label: string;
}) {
  const colors = useColors();
  const [text, setText] = useState("");
  useEffect(() => {
    const timer = setTimeout(() => setText(typed.trim()), SEARCH_DELAY_MS);
    return () => clearTimeout(timer);
  }, [typed]);
  const skip = text.length < 2 || typed.trim() === "";
  const { data, previousData, loading, error } = useQuery(ConstraintListDocument, {
    variables: { filter: { text: asSearched(text) }, sort: "number", offset: 0, limit: MOST_FOUND },
    skip,
  });
  if (skip) return null;
  if (error) return <Dense muted>{userMessage(error)}</Dense>;
  const page = (data ?? previousData)?.constraints;
  if (!page) return loading ? <Caption muted>Searching</Caption> : null;
  const found = page.constraints.filter(({ number }) => !values.includes(number));
  if (found.length === 0) return <Dense muted>No approved record matches “{text}”.</Dense>;
  return (
    <View
      role="list"
      aria-label={`Found for ${label}`}
      style={[styles.found, { borderColor: colors.hairline, backgroundColor: colors.surface }]}
    >
      {found.map(({ number, citation, fields }) => (
        <View key={number} role="listitem">
          <Press
            onPress={() => onTake(number)}
            label={`Take ${number}, ${citation.shortName}`}
            style={styles.row}
          >
            <View style={styles.rowContent}>
              <Mono style={styles.number}>{number}</Mono>
              <View style={styles.words}>
                <Dense>
                  {citation.shortName}
                  {fields.z ? `, z = ${fields.z}` : ""}
                </Dense>
                <Caption muted numberOfLines={1}>
                  {citation.title}
                </Caption>
              </View>
            </View>
          </Press>
        </View>
      ))}
    </View>
  );
}

/** A number in any spelling as the registry writes it. */
function asSearched(text: string): string {
  const number = parseRecordNumber(text);
  return number === null ? text : formatRecordNumber(number);
}

const styles = StyleSheet.create({
  all: { alignSelf: "stretch", gap: space.xxs },
  entry: { flexDirection: "row", alignItems: "flex-start", gap: space.xxs },
  field: { flex: 1, minWidth: 0 },
  add: { paddingTop: 14 },
  chips: { flexDirection: "row", flexWrap: "wrap", columnGap: space.xs },
  found: { borderWidth: 1, borderRadius: radius.field, overflow: "hidden" },
  row: { minHeight: target, justifyContent: "center" },
  rowContent: {
    flexDirection: "row",
    alignItems: "center",
    gap: space.s,
    paddingHorizontal: space.s,
    paddingVertical: space.xs,
  },
  number: { fontSize: 14 },
  words: { flex: 1, minWidth: 0 },
});
