import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { CheckRow } from "@/components/CheckRow";
import { Chip } from "@/components/Chip";
import { Field } from "@/components/Field";
import { Marker } from "@/components/Marker";
import { Sheet } from "@/components/Sheet";
import { Block, Caption, Dense, Label } from "@/components/Text";
import { useMethodTags } from "@/components/useMethodTags";
import { useColors } from "@/theme/ThemeProvider";
import {
  currentTags,
  FAMILY_NAMES,
  METHOD_FAMILIES,
  type MethodTag,
} from "~shared/methods/vocabulary";

function matches(tag: MethodTag, query: string): boolean {
  const words = query.toLowerCase().split(/\s+/).filter(Boolean);
  const text = [tag.name, FAMILY_NAMES[tag.family], tag.definition, ...tag.aliases]
    .join(" ")
    .toLowerCase();
  return words.every((word) => text.includes(word));
}

/** One or more tags of the method vocabulary, found by search or by family. */
export function MethodPicker({
  label,
  tags,
  error,
  onChange,
}: {
  label: string;
  tags: string[];
  error?: string;
  onChange: (tags: string[]) => void;
}) {
  const colors = useColors();
  const [open, setOpen] = useState(false);
  const [query, setQuery] = useState("");
  const methods = useMethodTags();
  // A draft may carry a retired tag: what took it over stands for it.
  const current = currentTags(tags);
  const chosen = methods.filter(({ tag }) => current.includes(tag));
  const shown = methods.filter((tag) => matches(tag, query));

  return (
    <View role="group" aria-label={label} style={{ gap: 8 }}>
      <Label>{label}</Label>
      {chosen.map((tag) => (
        <View key={tag.tag} style={{ flexDirection: "row", alignItems: "center", gap: 8 }}>
          <Marker family={tag.family} size={12} />
          <View style={styles.nameAndFamily}>
            <Chip
              label={tag.name}
              selected
              onRemove={() => onChange(current.filter((one) => one !== tag.tag))}
            />
            <Caption>{FAMILY_NAMES[tag.family]}</Caption>
          </View>
        </View>
      ))}
      <View style={{ flexDirection: "row" }}>
        <Button
          kind="outline"
          icon="shape-outline"
          label={chosen.length > 0 ? "Change the methods" : "Choose the methods"}
          onPress={() => setOpen(true)}
        />
      </View>
      {error ? <Dense style={{ color: colors.emberText }}>{error}</Dense> : null}
      <Sheet visible={open} title="Methods" onClose={() => setOpen(false)}>
        <View style={{ gap: 12 }}>
          <Field
            label="Search the methods"
            value={query}
            onChangeText={setQuery}
            autoComplete="off"
          />
          {shown.length === 0 ? (
            <Dense muted>
              No method of the vocabulary has these words. Choose the nearest and describe it in the
              remark; a maintainer can add a tag.
            </Dense>
          ) : null}
          {METHOD_FAMILIES.map((family) => {
            const members = shown.filter((tag) => tag.family === family);
            if (members.length === 0) return null;
            return (
              <View key={family} role="group" aria-label={FAMILY_NAMES[family]}>
                <View style={{ flexDirection: "row", alignItems: "center", gap: 8, marginTop: 8 }}>
                  <Marker family={family} size={12} />
                  <Block>{FAMILY_NAMES[family]}</Block>
                </View>
                {members.map(({ tag, name, definition }) => (
                  <CheckRow
                    key={tag}
                    label={name}
                    hint={definition}
                    checked={current.includes(tag)}
                    onChange={(checked) =>
                      onChange(checked ? [...current, tag] : current.filter((one) => one !== tag))
                    }
                  />
                ))}
              </View>
            );
          })}
          <Button kind="filled" label="Done" onPress={() => setOpen(false)} />
        </View>
      </Sheet>
    </View>
  );
}

const styles = StyleSheet.create({
  /** The longest names leave no room beside them on a small phone: the family goes below then. */
  nameAndFamily: {
    flexDirection: "row",
    flexWrap: "wrap",
    alignItems: "center",
    columnGap: 8,
    flexShrink: 1,
  },
});
