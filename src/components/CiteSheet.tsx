import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { useColors } from "@/theme/ThemeProvider";
import { radius, space } from "@/theme/tokens";

import { Button } from "./Button";
import { CitationLine } from "./CitationLine";
import { Sheet } from "./Sheet";
import { Caption, Dense, Label, Mono } from "./Text";

/** How to cite a record: the paper itself, and the registry's number beside it. */
export function CiteSheet({
  visible,
  onClose,
  quotable,
  citation,
}: {
  visible: boolean;
  onClose: () => void;
  /** "FL-0042.3" */
  quotable: string;
  citation: {
    key: string;
    shortName: string;
    authors?: readonly string[];
    year?: number | null;
    title: string;
    container?: string | null;
    volume?: string | null;
    pages?: string | null;
    bibtex: string;
  };
}) {
  const colors = useColors();
  const [copied, setCopied] = useState<"yes" | "no" | null>(null);
  async function copy() {
    try {
      await navigator.clipboard.writeText(citation.bibtex);
      setCopied("yes");
    } catch {
      setCopied("no");
    }
  }
  const number = quotable.replace(/\.\d+$/, "");
  return (
    <Sheet visible={visible} title="Cite" onClose={onClose}>
      <View style={styles.part}>
        <Label>{citation.title}</Label>
        <CitationLine citation={citation} />
      </View>
      <View
        style={[styles.code, { backgroundColor: colors.sunken, borderColor: colors.hairline }]}
        role="group"
        aria-label="BibTeX entry"
      >
        <Mono style={styles.mono}>{citation.bibtex}</Mono>
      </View>
      <View style={styles.actions}>
        <Button label="Copy BibTeX" kind="filled" icon="content-copy" onPress={() => void copy()} />
        <Button
          label="Download .bib"
          icon="tray-arrow-down"
          href={`/api/constraints/${number}.bib`}
        />
      </View>
      <View role="status">
        {copied === "yes" ? <Dense>Copied.</Dense> : null}
        {copied === "no" ? (
          <Dense>The browser refused; select the text above and copy it.</Dense>
        ) : null}
      </View>
      <Caption muted>
        Cite the paper; name the registry record as {quotable} so that its revision can be found.
      </Caption>
    </Sheet>
  );
}

const styles = StyleSheet.create({
  part: { gap: space.xxs },
  code: { borderRadius: radius.chip, borderWidth: 1, padding: space.s },
  mono: { fontSize: 12.5, lineHeight: 18 },
  actions: { flexDirection: "row", flexWrap: "wrap", gap: space.s },
});
