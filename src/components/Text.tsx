import type { ReactNode } from "react";
import { type StyleProp, StyleSheet, Text as NativeText, type TextStyle } from "react-native";
import { useColors } from "@/theme/ThemeProvider";
import { fonts } from "@/theme/tokens";
import { useLayoutClass } from "@/layout/useLayoutClass";
import { web } from "./web";

export interface TextProps {
  children: ReactNode;
  muted?: boolean;
  style?: StyleProp<TextStyle>;
  /** For aria-labelledby and aria-describedby. */
  nativeID?: string;
  numberOfLines?: number;
  /** Heading level, where the default one would break the outline of the page. */
  level?: 1 | 2 | 3 | 4;
}

function Plain({ kind, muted, style, level: _level, ...rest }: TextProps & { kind: TextStyle }) {
  const colors = useColors();
  return (
    <NativeText {...rest} style={[kind, { color: muted ? colors.muted : colors.ink }, style]} />
  );
}

function Heading({ level, ...rest }: TextProps & { kind: TextStyle; level: number }) {
  const colors = useColors();
  const { kind, muted, style, ...others } = rest;
  return (
    <NativeText
      {...others}
      role="heading"
      {...web({ "aria-level": level })}
      style={[kind, { color: muted ? colors.muted : colors.ink }, style]}
    />
  );
}

/** The page's title, h1. */
export function Title({ level = 1, ...props }: TextProps) {
  const phone = useLayoutClass() === "compact";
  return <Heading {...props} level={level} kind={phone ? styles.titlePhone : styles.title} />;
}
/** A section's head, h2. */
export function Section({ level = 2, ...props }: TextProps) {
  return <Heading {...props} level={level} kind={styles.section} />;
}
/** A block's head, h3. */
export function Block({ level = 3, ...props }: TextProps) {
  return <Heading {...props} level={level} kind={styles.block} />;
}
export function Body(props: TextProps) {
  return <Plain {...props} kind={styles.body} />;
}
export function Dense(props: TextProps) {
  return <Plain {...props} kind={styles.dense} />;
}
export function Label(props: TextProps) {
  return <Plain {...props} kind={styles.label} />;
}
export function Caption(props: TextProps) {
  return <Plain muted {...props} kind={styles.caption} />;
}
/** Numbers and code; inside another text it takes that text's size. */
export function Mono(props: TextProps) {
  return <Plain {...props} kind={styles.mono} />;
}

const UPRIGHT = /^[\u0391-\u03A9\d\s−().,=+]+$/;

/**
 * A symbol as a paper sets it: `x_HI`, `z_re`, `Δz`, `τ`. The part after the underscore is the
 * upright subscript; capital Greek and digits stand upright.
 */
export function SymbolText({
  children,
  muted,
  style,
}: {
  children: string;
  muted?: boolean;
  style?: StyleProp<TextStyle>;
}) {
  const colors = useColors();
  const [base = "", subscript] = children.split("_");
  const parts = base.match(/[\u0391-\u03A9\d\s−().,=+]+|[^\u0391-\u03A9\d\s−().,=+]+/g) ?? [];
  return (
    <NativeText style={[styles.symbol, muted && { color: colors.muted }, style]}>
      {parts.map((part, index) => (
        <NativeText key={index} style={UPRIGHT.test(part) ? styles.upright : styles.italic}>
          {part}
        </NativeText>
      ))}
      {subscript ? <NativeText style={styles.subscript}>{subscript}</NativeText> : null}
    </NativeText>
  );
}

const styles = StyleSheet.create({
  title: { fontFamily: fonts.serif, fontWeight: "600", fontSize: 28, lineHeight: 36 },
  titlePhone: { fontFamily: fonts.serif, fontWeight: "600", fontSize: 24, lineHeight: 32 },
  section: { fontFamily: fonts.serif, fontWeight: "600", fontSize: 20, lineHeight: 28 },
  block: { fontFamily: fonts.serif, fontWeight: "600", fontSize: 17, lineHeight: 24 },
  body: { fontFamily: fonts.sans, fontWeight: "400", fontSize: 16, lineHeight: 24 },
  dense: { fontFamily: fonts.sans, fontWeight: "400", fontSize: 14, lineHeight: 20 },
  label: { fontFamily: fonts.sans, fontWeight: "600", fontSize: 14, lineHeight: 20 },
  caption: { fontFamily: fonts.sans, fontWeight: "400", fontSize: 13, lineHeight: 18 },
  mono: {
    fontFamily: fonts.mono,
    fontVariant: ["tabular-nums"],
    ...web({ wordSpacing: "-0.3em" }),
  },
  symbol: { fontFamily: fonts.serif },
  italic: { fontStyle: "italic", fontFamily: fonts.serif },
  upright: { fontStyle: "normal", fontFamily: fonts.serif },
  // Size and shift follow the text around it, which only relative CSS units can say.
  subscript: {
    fontStyle: "normal",
    fontFamily: fonts.serif,
    ...web({ fontSize: "0.72em", verticalAlign: "-0.25em", lineHeight: 0 }),
  },
});
