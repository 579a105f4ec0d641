import { useId } from "react";
import { StyleSheet, View } from "react-native";
import { useColors } from "@/theme/ThemeProvider";
import { radius, space, target } from "@/theme/tokens";
import { Body, Caption, Label } from "./Text";

function rowStyle() {
  return {
    display: "flex",
    gap: 12,
    alignItems: "flex-start",
    minHeight: target,
    padding: "10px 0",
    boxSizing: "border-box",
    cursor: "pointer",
  } as const;
}

/** A yes or no, the whole row touchable. */
export function CheckRow({
  label,
  checked,
  onChange,
  hint,
}: {
  label: string;
  checked: boolean;
  onChange: (checked: boolean) => void;
  hint?: string;
}) {
  const colors = useColors();
  const id = useId();
  return (
    <View>
      <label style={rowStyle()}>
        <input
          type="checkbox"
          checked={checked}
          onChange={(event) => onChange(event.target.checked)}
          aria-describedby={hint ? id : undefined}
          style={{ width: 20, height: 20, margin: 2, flexShrink: 0, accentColor: colors.primary }}
        />
        <Body>{label}</Body>
      </label>
      {hint ? (
        <Caption nativeID={id} style={styles.hint}>
          {hint}
        </Caption>
      ) : null}
    </View>
  );
}

/** One of several answers in rows; a proposal carries its tag and is never preselected. */
export function RadioRows({
  label,
  value,
  options,
  onChange,
}: {
  label: string;
  value: string | null;
  options: readonly { value: string; label: string; hint?: string; tag?: string }[];
  onChange: (value: string) => void;
}) {
  const colors = useColors();
  const name = useId();
  return (
    <View role="radiogroup" aria-label={label}>
      {options.map((option) => (
        <View key={option.value}>
          <label style={rowStyle()}>
            <input
              type="radio"
              name={name}
              value={option.value}
              checked={option.value === value}
              onChange={() => onChange(option.value)}
              aria-describedby={option.hint ? `${name}-${option.value}` : undefined}
              style={{
                width: 20,
                height: 20,
                margin: 2,
                flexShrink: 0,
                accentColor: colors.primary,
              }}
            />
            <Body>{option.label}</Body>
            {option.tag ? (
              <View style={[styles.tag, { backgroundColor: colors.petrolTint }]}>
                <Label style={{ color: colors.primary, fontSize: 13 }}>{option.tag}</Label>
              </View>
            ) : null}
          </label>
          {option.hint ? (
            <Caption nativeID={`${name}-${option.value}`} style={styles.hint}>
              {option.hint}
            </Caption>
          ) : null}
        </View>
      ))}
    </View>
  );
}

const styles = StyleSheet.create({
  hint: { paddingLeft: 36, marginTop: -6, paddingBottom: space.xs },
  tag: { borderRadius: radius.field, paddingHorizontal: space.xs, paddingVertical: 2 },
});
