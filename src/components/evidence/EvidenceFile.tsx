import { type ReactNode, useState } from "react";
import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import Icon, { type IconName } from "@/components/Icon";
import { Caption, Dense, Label, Mono } from "@/components/Text";
import { radius, space } from "@/theme/tokens";
import type { EvidencePartsFragment } from "~graphql/generated/graphql";
import { bytesInWords, EVIDENCE_WORDS, type EvidenceKind } from "~shared/evidence/evidence";

export const KIND_ICONS: Record<EvidenceKind, IconName> = {
  pdf: "file-document-outline",
  png: "image-outline",
  jpeg: "image-outline",
  csv: "file-delimited-outline",
};

/** A kept file: what it is and, for who may see it, its name, its picture and the way to save it. */
export function EvidenceFile({
  file,
  children,
}: {
  file: EvidencePartsFragment;
  /** Between its words and its picture: what its owner may change. */
  children?: ReactNode;
}) {
  const { kind, bytes, digest, name, caption, address } = file;
  const what = `${EVIDENCE_WORDS[kind]}, ${bytesInWords(bytes)}`;
  return (
    <View style={styles.all}>
      <View style={styles.head}>
        <View style={styles.icon}>
          <Icon name={KIND_ICONS[kind]} size={20} />
        </View>
        <View style={styles.words}>
          <Label style={styles.anywhere}>{name ?? what}</Label>
          {name === null || name === undefined ? null : <Caption>{what}</Caption>}
          {!children && caption ? <Dense style={styles.anywhere}>{caption}</Dense> : null}
          <Caption style={styles.anywhere}>
            {"digest "}
            <Mono>{`${digest.slice(0, 12)}…`}</Mono>
          </Caption>
        </View>
        {address ? (
          <Button
            kind="text"
            icon="tray-arrow-down"
            label="Save"
            accessibilityLabel={`Save ${name ?? what}`}
            href={address}
          />
        ) : null}
      </View>
      {children}
      {address && (kind === "png" || kind === "jpeg") ? (
        <Picture address={address} alt={caption || name || what} />
      ) : null}
    </View>
  );
}

/** Drawn from the same address; its answer is never a page, but an image it may be. */
function Picture({ address, alt }: { address: string; alt: string }) {
  const [failed, setFailed] = useState(false);
  if (failed) return <Caption>The picture can’t be shown here. Save it to look at it.</Caption>;
  return (
    <img
      src={address}
      alt={alt}
      loading="lazy"
      onError={() => setFailed(true)}
      style={{
        maxWidth: "100%",
        maxHeight: 420,
        objectFit: "contain",
        objectPosition: "left top",
        borderRadius: radius.field,
        alignSelf: "flex-start",
        // Scans are black on transparent as often as on white.
        backgroundColor: "#FFFFFF",
      }}
    />
  );
}

const styles = StyleSheet.create({
  all: { gap: space.s },
  head: { flexDirection: "row", alignItems: "flex-start", flexWrap: "wrap", gap: space.s },
  icon: { paddingTop: 2 },
  words: { flex: 1, minWidth: 140, gap: 2 },
  anywhere: { overflowWrap: "anywhere" } as object,
});
