import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { Notice } from "@/components/Notice";
import { Caption, Dense, Mono, Section } from "@/components/Text";
import { space } from "@/theme/tokens";
import type { TableBySlugQuery } from "~graphql/generated/graphql";

import { savePng } from "./savePng";

type Table = NonNullable<TableBySlugQuery["fittingTable"]>;

/** Every file of the version shown, the figure as PNG too, and how to fetch them without the screen. */
export function TableFiles({ table }: { table: Table }) {
  const [failure, setFailure] = useState<string | null>(null);
  const [busy, setBusy] = useState(false);
  const [first, ...others] = table.files;
  const figure = table.files.find(({ kind }) => kind === "svg");
  const origin = typeof window === "undefined" ? "" : window.location.origin;
  async function png() {
    if (!figure) return;
    setFailure(null);
    setBusy(true);
    try {
      await savePng(figure.path, `fogline-table-${table.slug}.png`);
    } catch {
      setFailure("The figure could not be drawn here. Its SVG holds the same.");
    } finally {
      setBusy(false);
    }
  }
  return (
    <View style={styles.all}>
      <Section>Download</Section>
      <View style={styles.buttons}>
        {first ? (
          <Button label={first.name} kind="filled" icon="tray-arrow-down" href={first.path} />
        ) : null}
        {others.map(({ kind, name, path }) => (
          <Button key={kind} label={name} icon="tray-arrow-down" href={path} />
        ))}
        {figure ? (
          <Button label="Figure, PNG" icon="image-outline" busy={busy} onPress={() => void png()} />
        ) : null}
      </View>
      {failure ? <Notice grade="error">{failure}</Notice> : null}
      {first ? (
        <>
          <Dense muted>
            {table.visibility === "private"
              ? "Only you can fetch it, signed in."
              : "Anyone can fetch it, without an account:"}
          </Dense>
          {table.visibility === "private" ? null : (
            <Mono style={styles.curl}>{`curl -O ${origin}${first.path}`}</Mono>
          )}
        </>
      ) : null}
      <Caption muted>
        {`An address with @${table.version} in it gives the same bytes for ever; one without gives the newest version.`}
      </Caption>
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.s },
  buttons: { flexDirection: "row", flexWrap: "wrap", gap: space.s },
  curl: { fontSize: 13, lineHeight: 20 },
});
