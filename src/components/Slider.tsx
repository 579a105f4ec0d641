import { useId, useState } from "react";
import { StyleSheet, View } from "react-native";
import { useColors } from "@/theme/ThemeProvider";
import { fonts, target } from "@/theme/tokens";
import { Dense, SymbolText } from "./Text";

/**
 * A value to move: by dragging, by arrow and page keys, or by typing it. The native range carries
 * role, value and keys; Paper has no slider.
 */
export function Slider({
  label,
  symbol,
  value,
  min,
  max,
  step,
  digits,
  onChange,
  tone,
  context,
}: {
  label: string;
  symbol?: string;
  value: number;
  min: number;
  max: number;
  step: number;
  digits: number;
  onChange: (value: number) => void;
  /** Colour of the filled part; petrol unless said. */
  tone?: string;
  /** Whose value it is, for the accessible name. */
  context?: string;
}) {
  const colors = useColors();
  const id = useId();
  const [typed, setTyped] = useState<string | null>(null);
  // A value that changed elsewhere ends what is being typed.
  const [shown, setShown] = useState(value);
  if (shown !== value) {
    setShown(value);
    setTyped(null);
  }
  const filled = ((value - min) / (max - min)) * 100;
  const hue = tone ?? colors.primary;
  const name = context ? `${label}, ${context}` : label;

  function commit() {
    if (typed === null) return;
    const number = Number(typed.replace(",", "."));
    if (typed.trim() !== "" && Number.isFinite(number)) {
      onChange(Math.min(max, Math.max(min, number)));
    }
    setTyped(null);
  }

  return (
    <View>
      <View style={styles.head}>
        <Dense style={styles.label}>
          {label} {symbol ? <SymbolText>{symbol}</SymbolText> : null}
        </Dense>
        <input
          aria-label={`${name}, value`}
          inputMode="decimal"
          value={typed ?? value.toFixed(digits)}
          onChange={(event) => setTyped(event.target.value)}
          onBlur={commit}
          onKeyDown={(event) => {
            if (event.key === "Enter") commit();
            if (event.key === "Escape") setTyped(null);
          }}
          className="fogline-number"
          style={{
            width: 56,
            minHeight: 28,
            padding: "0 4px",
            border: 0,
            borderBottom: `1px solid ${colors.outline}`,
            borderRadius: 0,
            background: "transparent",
            color: colors.ink,
            fontFamily: fonts.mono,
            fontSize: 15,
            textAlign: "right",
          }}
        />
      </View>
      <input
        id={id}
        type="range"
        className="fogline-range"
        aria-label={name}
        aria-valuetext={value.toFixed(digits)}
        min={min}
        max={max}
        step={step}
        value={value}
        onChange={(event) => onChange(Number(event.target.value))}
        style={
          {
            height: target,
            marginTop: -8,
            marginBottom: -4,
            "--tone": hue,
            "--rest": colors.hairline,
            "--halo": colors.surface,
            "--filled": `${filled}%`,
          } as React.CSSProperties
        }
      />
    </View>
  );
}

const styles = StyleSheet.create({
  head: { flexDirection: "row", alignItems: "center", justifyContent: "space-between" },
  label: { fontSize: 15 },
});
