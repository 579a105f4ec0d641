import { useEffect, useState } from "react";
import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { Choice } from "@/components/Choice";
import { Field } from "@/components/Field";
import { Sheet } from "@/components/Sheet";
import { useLayoutClass } from "@/layout/useLayoutClass";
import { space } from "@/theme/tokens";
import { EVENT_KINDS, eventName } from "~shared/event/words";

import type { LogFilter, LogFilterName, useLogFilter } from "./useLogFilter";

type Kept = ReturnType<typeof useLogFilter>;

const REST_MS = 400;
const DAY = /^\d{4}-\d{2}-\d{2}$/;

const KINDS = EVENT_KINDS.map((value) => ({ value, label: eventName(value) })).sort((a, b) =>
  a.label.localeCompare(b.label, "en"),
);

/** Filter of the log: beside each other where there is room, behind a button on a phone. */
export function LogFilterForm({ kept }: { kept: Kept }) {
  const phone = useLayoutClass() === "compact";
  const [open, setOpen] = useState(false);
  const narrowed = Object.keys(kept.filter).length;
  if (!phone) return <Fields kept={kept} />;
  return (
    <>
      <Button
        label={narrowed > 0 ? `Filter (${narrowed} set)` : "Filter"}
        icon="tune-variant"
        onPress={() => setOpen(true)}
      />
      <Sheet
        visible={open}
        title="Filter"
        onClose={() => setOpen(false)}
        footer={<Button label="Show the events" kind="filled" onPress={() => setOpen(false)} />}
      >
        <Fields kept={kept} />
      </Sheet>
    </>
  );
}

function Fields({ kept }: { kept: Kept }) {
  const { filter, set } = kept;
  return (
    <View style={styles.fields}>
      <View style={styles.wide}>
        <Typed name="person" label="Person" hint="Part of a name or address" kept={kept} />
      </View>
      <View style={styles.wide}>
        <Typed name="about" label="About" hint="FL-0042, FL-0042.3, FLS-0003" kept={kept} />
      </View>
      <View style={styles.wide}>
        <Choice
          label="Kind"
          value={filter.kind ?? null}
          options={KINDS}
          placeholder="Every kind"
          onChange={(kind) => set({ kind: kind ?? "" })}
        />
      </View>
      <View style={styles.days}>
        <View style={styles.day}>
          <Typed name="from" label="From" hint="As 2031-02-03" kept={kept} day />
        </View>
        <View style={styles.day}>
          <Typed name="to" label="To" hint="Day included" kept={kept} day />
        </View>
      </View>
    </View>
  );
}

/** A text that goes into the address when typing rests; a day only once it is one. */
function Typed({
  name,
  label,
  hint,
  kept,
  day = false,
}: {
  name: LogFilterName;
  label: string;
  hint: string;
  kept: Kept;
  day?: boolean;
}) {
  const there = kept.filter[name] ?? "";
  const [text, setText] = useState(there);
  const [seen, setSeen] = useState(there);
  const [sent, setSent] = useState<string | null>(null);
  if (seen !== there) {
    setSeen(there);
    // What was typed after it was sent must not be undone by its own arrival in the address.
    if (there !== sent) setText(there);
  }
  const wrong = day && text.trim() !== "" && !isDay(text.trim());
  function send() {
    if (wrong || text.trim() === there) return;
    setSent(text.trim());
    const changes: LogFilter = { [name]: text };
    kept.set(changes);
  }
  useEffect(() => {
    if (wrong || text.trim() === there) return undefined;
    const timer = setTimeout(send, REST_MS);
    return () => clearTimeout(timer);
    // Only typing starts the clock; a filter set elsewhere must not send an old text.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [text]);
  return (
    <Field
      name={name}
      label={label}
      hint={hint}
      value={text}
      onChangeText={setText}
      onSubmit={send}
      maxLength={day ? 10 : 120}
      autoComplete="off"
      inputMode={day ? "text" : "search"}
      error={wrong && text.trim().length >= 10 ? "There is no such day" : null}
    />
  );
}

function isDay(text: string): boolean {
  if (!DAY.test(text)) return false;
  const at = new Date(`${text}T00:00:00Z`);
  return !Number.isNaN(at.getTime()) && at.toISOString().startsWith(text);
}

const styles = StyleSheet.create({
  fields: { flexDirection: "row", flexWrap: "wrap", columnGap: space.m, rowGap: space.xs },
  wide: { flexGrow: 1, flexBasis: 170 },
  days: { flexGrow: 1, flexBasis: 250, flexDirection: "row", gap: space.m },
  day: { flex: 1, minWidth: 0 },
});
