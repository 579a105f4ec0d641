import { useId, useState } from "react";
import { StyleSheet, View } from "react-native";
import { space } from "@/theme/tokens";
import { Chip } from "./Chip";
import { Field } from "./Field";
import { IconButton } from "./Button";
import { web } from "./web";

/** Several words, each a chip: Enter or the separator adds what is typed, a press takes one out. */
export function TagField({
  label,
  values,
  onChange,
  suggestions = [],
  suggestionWords,
  comparable,
  hint,
  error,
  separator = ",",
  words,
}: {
  label: string;
  values: readonly string[];
  onChange: (values: string[]) => void;
  suggestions?: readonly string[];
  /** How a suggestion reads; as a stored value unless said. */
  suggestionWords?: (value: string) => string;
  /**
   * Form in which names are compared. With it suggestions wait for something typed, and a name that is
   * known in another spelling is not taken twice.
   */
  comparable?: (name: string) => string;
  hint?: string;
  error?: string | null;
  /** Character that ends a word; null where a word may hold any, as names do. */
  separator?: string | null;
  /** How a stored value reads; itself unless said. */
  words?: (value: string) => string;
}) {
  const [typed, setTyped] = useState("");
  const groupId = useId();
  const read = words ?? ((value: string) => value);

  const same = (one: string, other: string) =>
    comparable ? comparable(one) === comparable(other) : one === other;

  function add(text: string) {
    const next = [...values];
    const parts = separator === null ? [text] : text.split(separator);
    for (const part of parts.map((one) => one.trim())) {
      if (part !== "" && !next.some((value) => same(value, part))) next.push(part);
    }
    if (next.length > values.length) onChange(next);
    setTyped("");
  }

  const reads = suggestionWords ?? read;
  const lower = typed.trim().toLowerCase();
  const offered = suggestions
    .filter((value) => !values.some((other) => same(value, other)))
    .filter((value) =>
      comparable
        ? comparable(typed) !== "" && comparable(value).includes(comparable(typed))
        : lower === "" || read(value).toLowerCase().includes(lower),
    )
    .slice(0, 8);
  return (
    <View
      role="group"
      aria-labelledby={groupId}
      style={styles.all}
      {...web({
        // Nothing typed is lost by going on; going to a suggestion is no going on.
        onBlur: (event: FocusEvent) => {
          const group = event.currentTarget as Element;
          const inside = event.relatedTarget instanceof Node && group.contains(event.relatedTarget);
          if (!inside && typed.trim() !== "") add(typed);
        },
      })}
    >
      <View style={styles.entry}>
        <View style={styles.field}>
          <Field
            label={label}
            value={typed}
            onChangeText={(text) =>
              separator !== null && text.includes(separator) ? add(text) : setTyped(text)
            }
            onSubmit={() => add(typed)}
            hint={hint}
            error={error}
          />
        </View>
        <View style={styles.add}>
          <IconButton icon="plus" label={`Add to ${label}`} onPress={() => add(typed)} />
        </View>
      </View>
      {values.length > 0 ? (
        <View style={styles.chips}>
          {values.map((value) => (
            <Chip
              key={value}
              label={read(value)}
              onRemove={() => onChange(values.filter((other) => other !== value))}
            />
          ))}
        </View>
      ) : null}
      {offered.length > 0 ? (
        <View
          style={styles.chips}
          aria-label={`Suggestions for ${label}`}
          role="group"
          // The field keeps the focus while one is pressed, or it would take the half-typed word.
          {...web({ onMouseDown: (event: MouseEvent) => event.preventDefault() })}
        >
          {offered.map((value) => (
            <Chip key={value} label={reads(value)} icon="plus" onPress={() => add(value)} />
          ))}
        </View>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  all: { alignSelf: "stretch" },
  entry: { flexDirection: "row", alignItems: "flex-start", gap: space.xxs },
  field: { flex: 1, minWidth: 0 },
  add: { paddingTop: 14 },
  chips: { flexDirection: "row", flexWrap: "wrap", columnGap: space.xs },
});
