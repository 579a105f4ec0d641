import { useId, useState } from "react";
import { StyleSheet, View } from "react-native";
import { useColors } from "@/theme/ThemeProvider";
import { fonts } from "@/theme/tokens";
import { FieldFrame } from "./Field";
import Icon from "./Icon";

/** One of several words: a real select, so that every device offers its own picker. */
export function Choice({
  label,
  value,
  options,
  onChange,
  error,
  hint,
  placeholder = "Choose",
  spokenLabel,
}: {
  label: string;
  /** Name heard and looked for, where the label stands beside what it is about; begins with it. */
  spokenLabel?: string;
  value: string | null;
  options: readonly { value: string; label: string }[];
  onChange: (value: string | null) => void;
  error?: string | null;
  hint?: string;
  placeholder?: string;
}) {
  const colors = useColors();
  const id = useId();
  const [focused, setFocused] = useState(false);
  return (
    <FieldFrame label={label} controlId={id} focused={focused} error={error} hint={hint}>
      <select
        id={id}
        value={value ?? ""}
        onChange={(event) => onChange(event.target.value === "" ? null : event.target.value)}
        onFocus={() => setFocused(true)}
        onBlur={() => setFocused(false)}
        aria-label={spokenLabel}
        aria-invalid={error ? true : undefined}
        aria-describedby={error || hint ? `${id}-about` : undefined}
        style={{
          appearance: "none",
          border: 0,
          outline: "none",
          width: "100%",
          minHeight: 54,
          padding: "8px 40px 8px 12px",
          backgroundColor: "transparent",
          color: value === null ? colors.muted : colors.ink,
          fontFamily: fonts.sans,
          fontSize: 16,
          lineHeight: "24px",
          textOverflow: "ellipsis",
          borderRadius: 4,
        }}
      >
        <option value="" style={{ color: colors.muted, backgroundColor: colors.surface }}>
          {placeholder}
        </option>
        {options.map((option) => (
          <option
            key={option.value}
            value={option.value}
            style={{ color: colors.ink, backgroundColor: colors.surface }}
          >
            {option.label}
          </option>
        ))}
      </select>
      <View style={styles.arrow} pointerEvents="none">
        <Icon name="menu-down" color={colors.muted} />
      </View>
    </FieldFrame>
  );
}

const styles = StyleSheet.create({ arrow: { position: "absolute", right: 10, top: 15 } });
