import { useEffect, useRef, useState } from "react";
import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { Block, Dense, Mono } from "@/components/Text";
import { web } from "@/components/web";
import { useColors } from "@/theme/ThemeProvider";
import { radius, space } from "@/theme/tokens";

/** The secret of a new token, this once: it is kept nowhere, and gone when the page is left. */
export function TokenSecret({
  name,
  secret,
  onDone,
}: {
  name: string;
  secret: string;
  onDone: () => void;
}) {
  const colors = useColors();
  const [copied, setCopied] = useState<"yes" | "no" | null>(null);
  const box = useRef<View>(null);
  useEffect(() => {
    box.current?.focus();
  }, []);
  const copy = async () => {
    try {
      await navigator.clipboard.writeText(secret);
      setCopied("yes");
    } catch {
      setCopied("no");
    }
  };
  return (
    <View
      ref={box}
      role="group"
      aria-label="Your new token"
      {...web({ tabIndex: -1 })}
      style={[styles.box, { borderColor: colors.primary, backgroundColor: colors.petrolTint }]}
    >
      <Block>{`“${name}” is made`}</Block>
      <Dense>
        Copy the token now and keep it as you keep a password. It is shown this once; if you lose
        it, revoke it and make another.
      </Dense>
      <View
        style={[styles.secret, { backgroundColor: colors.surface, borderColor: colors.hairline }]}
      >
        <Mono style={[styles.mono, { color: colors.ink }]}>{secret}</Mono>
      </View>
      <Dense>
        A program sends it as <Mono style={styles.inline}>Authorization: Bearer fgl_…</Mono>
      </Dense>
      <View style={styles.actions}>
        <Button
          kind="filled"
          icon="content-copy"
          label="Copy the token"
          onPress={() => void copy()}
        />
        <Button label="I have it" onPress={onDone} />
      </View>
      <View role="status">
        {copied === "yes" ? <Dense>Copied.</Dense> : null}
        {copied === "no" ? (
          <Dense>The browser refused; select the token above and copy it.</Dense>
        ) : null}
      </View>
    </View>
  );
}

const styles = StyleSheet.create({
  box: { borderRadius: radius.card, borderWidth: 1, padding: space.m, gap: space.s },
  secret: { borderRadius: radius.chip, borderWidth: 1, padding: space.s },
  mono: {
    fontSize: 15,
    lineHeight: 22,
    userSelect: "all",
    ...web({ overflowWrap: "anywhere" }),
  },
  inline: { fontSize: 13 },
  actions: { flexDirection: "row", flexWrap: "wrap", gap: space.s },
});
