import { Platform, StyleSheet, View } from "react-native";
import { lineText, type Notation } from "~shared/statement/notation";
import { space } from "@/theme/tokens";
import { Dense, Mono, SymbolText } from "./Text";

export type NotationSize = "row" | "readout" | "panel" | "stated";

const SIZES: Record<NotationSize, { value: number; symbol: number; tail: number }> = {
  row: { value: 15, symbol: 15, tail: 14 },
  readout: { value: 18, symbol: 17, tail: 14 },
  panel: { value: 20, symbol: 17, tail: 14 },
  stated: { value: 22, symbol: 19, tail: 14 },
};

const SYMBOLS: Record<Notation["symbol"], string> = {
  xHI: "x_HI",
  xHII: "x_HII",
  xe: "x_e",
  logxHI: "x_HI",
  logxHII: "x_HII",
  logxe: "x_e",
  tau: "τ",
  tauRange: "τ",
  z: "z",
  dz: "Δz",
  dt: "Δt",
};

/** The symbol of a notation, set in the serif: x with its subscript, log10 before it if need be. */
export function NotationSymbolText({ notation, size }: { notation: Notation; size: number }) {
  const log = notation.symbol.startsWith("log");
  return (
    <Dense style={{ fontSize: size, lineHeight: size * 1.4 }}>
      {log ? <SymbolText>{"log_10"}</SymbolText> : null}
      {log ? " " : null}
      <SymbolText>{SYMBOLS[notation.symbol]}</SymbolText>
      {notation.argument ? <SymbolText>{`(${notation.argument})`}</SymbolText> : null}
    </Dense>
  );
}

/**
 * A statement as a paper sets it: plus above minus at 0.74 of the value, ± when they are equal,
 * a true minus, a limit followed by its level. Heard as one line.
 */
export function NotationText({
  notation,
  size = "row",
  symbol = size !== "row",
  tail = size !== "row" || notation.relation === "<" || notation.relation === ">",
}: {
  notation: Notation;
  size?: NotationSize;
  /** Whether the symbol and its equals sign stand before the number. */
  symbol?: boolean;
  tail?: boolean;
}) {
  const sizes = SIZES[size];
  const { relation, value, plus, minus, low, high, limitSigma, unit } = notation;
  const number = {
    fontSize: sizes.value,
    lineHeight: sizes.value * 1.3,
    fontWeight: "500",
  } as const;
  const small = {
    fontSize: Math.max(12, sizes.value * 0.74),
    lineHeight: Math.max(12, sizes.value * 0.74) * 1.08,
    fontWeight: "500",
  } as const;
  const equal = plus !== null && plus === minus;
  const stacked = !equal && (plus !== null || minus !== null);
  const sign =
    relation === "<" || relation === ">" ? relation : relation === "=" && symbol ? "=" : "";
  const band = low !== null || high !== null;
  const text = lineText(notation);
  // A statement without a number, a curve alone, is named by its word.
  const word = value === null && !band;
  return (
    <View style={styles.line} role="img" aria-label={text}>
      <View style={styles.row} aria-hidden={Platform.OS === "web"}>
        {symbol ? <NotationSymbolText notation={notation} size={sizes.symbol} /> : null}
        {sign || (band && symbol) ? (
          <Mono style={[number, styles.sign, symbol && styles.afterSymbol]}>{sign || "="}</Mono>
        ) : null}
        {band ? (
          // A dash between two negative numbers would read as a third minus.
          <Mono
            style={number}
          >{`${low ?? "?"}${high?.startsWith("−") ? " to " : "–"}${high ?? "?"}`}</Mono>
        ) : null}
        {value === null ? null : <Mono style={number}>{value}</Mono>}
        {equal ? <Mono style={number}>{` ± ${plus}`}</Mono> : null}
        {stacked ? (
          <View style={styles.stack}>
            <Mono style={small}>{plus === null ? " " : `+${plus}`}</Mono>
            <Mono style={small}>{minus === null ? " " : `−${minus}`}</Mono>
          </View>
        ) : null}
        {limitSigma === null ? null : (
          <Mono style={number}>{relation === ">" ? ` − ${limitSigma}` : ` + ${limitSigma}`}</Mono>
        )}
        {unit && !word ? <Dense style={styles.unit}>{unit}</Dense> : null}
      </View>
      {(tail || word) && notation.tail ? (
        <Dense aria-hidden style={[styles.tail, { fontSize: sizes.tail }]}>
          {notation.tail}
        </Dense>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  line: {
    flexDirection: "row",
    alignItems: "center",
    flexWrap: "wrap",
    flexShrink: 1,
    columnGap: 6,
  },
  row: { flexDirection: "row", alignItems: "center" },
  tail: { flexShrink: 1 },
  // Without a symbol before it a limit's sign stands where the numbers of other rows begin.
  sign: { paddingRight: space.xxs },
  afterSymbol: { paddingLeft: space.xxs },
  stack: { paddingLeft: 3, alignItems: "flex-start" },
  unit: { paddingLeft: 6 },
});
