import { type ReactNode, useId, useState } from "react";
import { StyleSheet, TextInput, View } from "react-native";
import { useGround } from "@/theme/Ground";
import { useColors } from "@/theme/ThemeProvider";
import { fonts, radius, space } from "@/theme/tokens";
import Icon from "./Icon";
import { Caption } from "./Text";
import { web } from "./web";

/** The patch is the page's colour above the edge and the field's below it, as on any ground. */
function patchImage(page: string, field: string): string {
  return `linear-gradient(${page} 55%, ${field} 55%)`;
}

/** Frame of every entry: 56 high, the label a patch on its upper edge, error or hint below. */
export function FieldFrame({
  label,
  controlId,
  focused,
  error,
  hint,
  tall = false,
  children,
}: {
  label: string;
  controlId: string;
  focused: boolean;
  error?: string | null;
  hint?: string;
  tall?: boolean;
  children: ReactNode;
}) {
  const colors = useColors();
  const ground = useGround();
  const line = error ? colors.ember : focused ? colors.primary : colors.outline;
  const labelColor = error ? colors.emberText : focused ? colors.primary : colors.muted;
  return (
    <View style={styles.frame}>
      <View
        style={[
          styles.box,
          tall && styles.tall,
          { borderColor: line, backgroundColor: colors.surface },
          // The second pixel goes inwards, so that nothing moves.
          (focused || error) && web({ boxShadow: `inset 0 0 0 1px ${line}` }),
        ]}
      >
        {children}
        <View style={styles.labelRow} pointerEvents="none">
          <label
            htmlFor={controlId}
            style={{
              fontFamily: fonts.sans,
              fontSize: 13,
              lineHeight: "16px",
              color: labelColor,
              backgroundImage: patchImage(ground, colors.surface),
              padding: "0 4px",
              whiteSpace: "nowrap",
              overflow: "hidden",
              textOverflow: "ellipsis",
            }}
          >
            {label}
          </label>
        </View>
      </View>
      {error ? (
        <View style={styles.below}>
          <Icon name="close-circle-outline" size={16} color={colors.emberText} />
          <Caption nativeID={`${controlId}-about`} style={{ color: colors.emberText, flex: 1 }}>
            {error}
          </Caption>
        </View>
      ) : hint ? (
        <View style={styles.below}>
          <Caption nativeID={`${controlId}-about`}>{hint}</Caption>
        </View>
      ) : null}
    </View>
  );
}

/** One line, or several, of typed text. Numbers are set in the figures' face. */
export function Field({
  label,
  value,
  onChangeText,
  error,
  hint,
  numeric = false,
  multiline = false,
  secure = false,
  autoComplete,
  inputMode,
  onBlur,
  maxLength,
  name,
  onSubmit,
  rows = 4,
}: {
  label: string;
  value: string;
  onChangeText: (text: string) => void;
  error?: string | null;
  hint?: string;
  numeric?: boolean;
  multiline?: boolean;
  secure?: boolean;
  autoComplete?: string;
  inputMode?: "text" | "decimal" | "numeric" | "email" | "search" | "url";
  onBlur?: () => void;
  maxLength?: number;
  name?: string;
  /** Enter, in a single line. */
  onSubmit?: () => void;
  rows?: number;
}) {
  const colors = useColors();
  const id = useId();
  const [focused, setFocused] = useState(false);
  return (
    <FieldFrame
      label={label}
      controlId={id}
      focused={focused}
      error={error}
      hint={hint}
      tall={multiline}
    >
      <TextInput
        nativeID={id}
        value={value}
        onChangeText={onChangeText}
        onFocus={() => setFocused(true)}
        onBlur={() => {
          setFocused(false);
          onBlur?.();
        }}
        onSubmitEditing={onSubmit}
        multiline={multiline}
        numberOfLines={multiline ? rows : undefined}
        secureTextEntry={secure}
        autoComplete={autoComplete as never}
        autoCapitalize="none"
        autoCorrect={!numeric && multiline}
        inputMode={inputMode ?? (numeric ? "decimal" : "text")}
        maxLength={maxLength}
        {...web({
          name,
          "aria-invalid": error ? true : undefined,
          "aria-describedby": error || hint ? `${id}-about` : undefined,
        })}
        style={[
          styles.input,
          numeric ? styles.numeric : styles.text,
          multiline && styles.multiline,
          { color: colors.ink },
          web({ outlineStyle: "none" }),
        ]}
      />
    </FieldFrame>
  );
}

const styles = StyleSheet.create({
  frame: { alignSelf: "stretch", minWidth: 0, paddingTop: 8 },
  box: { minHeight: 56, borderWidth: 1, borderRadius: radius.field, justifyContent: "center" },
  tall: { minHeight: 112 },
  labelRow: { position: "absolute", top: -9, left: 8, right: 8, flexDirection: "row" },
  input: { minHeight: 54, paddingHorizontal: space.s, paddingVertical: space.xs },
  text: { fontFamily: fonts.sans, fontSize: 16, lineHeight: 24 },
  numeric: { fontFamily: fonts.mono, fontSize: 17, lineHeight: 24 },
  // A margin, since what scrolls would run under the label through a padding.
  multiline: { marginTop: space.s, paddingTop: space.xxs, textAlignVertical: "top" },
  below: { flexDirection: "row", gap: 6, alignItems: "flex-start", paddingTop: 4, paddingLeft: 12 },
});
