import { type ReactNode, useId } from "react";
import { StyleSheet, View } from "react-native";
import { useColors } from "@/theme/ThemeProvider";
import { radius, target } from "@/theme/tokens";
import { Label } from "./Text";

/** One of a few, side by side; with glyphs the segments are 60 high. Native radios underneath. */
export function Segments({
  label,
  value,
  options,
  onChange,
}: {
  label: string;
  value: string | null;
  options: readonly { value: string; label: string; glyph?: ReactNode }[];
  onChange: (value: string) => void;
}) {
  const colors = useColors();
  const name = useId();
  const tall = options.some((option) => option.glyph !== undefined);
  return (
    <View
      role="radiogroup"
      aria-label={label}
      style={[styles.group, { borderColor: colors.outline, borderRadius: tall ? 22 : radius.pill }]}
    >
      {options.map((option, index) => {
        const chosen = option.value === value;
        return (
          <label
            key={option.value}
            className="fogline-segment"
            style={{
              flex: "1 1 0",
              minWidth: 0,
              minHeight: tall ? 60 : target,
              display: "flex",
              flexDirection: "column",
              alignItems: "center",
              justifyContent: "center",
              gap: 2,
              position: "relative",
              cursor: "pointer",
              boxSizing: "border-box",
              padding: tall ? "0 3px" : "0 8px",
              borderLeft: index === 0 ? "none" : `1px solid ${colors.outline}`,
              backgroundColor: chosen ? colors.petrolTint : colors.surface,
            }}
          >
            <input
              type="radio"
              name={name}
              value={option.value}
              checked={chosen}
              onChange={() => onChange(option.value)}
              style={{ position: "absolute", inset: 0, opacity: 0, margin: 0, cursor: "pointer" }}
            />
            {option.glyph}
            <Label style={{ color: chosen ? colors.primary : colors.ink, textAlign: "center" }}>
              {option.label}
            </Label>
          </label>
        );
      })}
    </View>
  );
}

const styles = StyleSheet.create({
  group: { flexDirection: "row", borderWidth: 1, overflow: "hidden" },
});
