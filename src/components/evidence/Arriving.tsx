import { StyleSheet, View } from "react-native";
import { ProgressBar } from "react-native-paper";

import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Notice } from "@/components/Notice";
import { Caption, Label } from "@/components/Text";
import { space } from "@/theme/tokens";
import { bytesInWords } from "~shared/evidence/evidence";

import type { SentFile } from "./useSending";

/** A file on its way: how far it is, or why it was not taken. */
export function Arriving({
  sent,
  onStop,
  onAgain,
}: {
  sent: SentFile;
  onStop: () => void;
  onAgain: () => void;
}) {
  const { file, part, problem } = sent;
  if (problem !== null) {
    return (
      <Notice
        grade="error"
        title={`${file.name} is not attached`}
        action={
          <>
            <Button kind="tonal" icon="refresh" label="Send it again" onPress={onAgain} />
            <Button kind="text" label="Leave it out" onPress={onStop} />
          </>
        }
      >
        {problem}
      </Notice>
    );
  }
  const percent = Math.round(part * 100);
  const words = part < 1 ? `${percent} % of ${bytesInWords(file.size)}` : "Being looked into";
  return (
    <Card style={styles.all}>
      <View style={styles.line}>
        <View style={styles.words}>
          <Label style={styles.anywhere}>{file.name}</Label>
          <Caption>{words}</Caption>
        </View>
        <Button
          kind="text"
          label="Stop"
          accessibilityLabel={`Stop ${file.name}`}
          onPress={onStop}
        />
      </View>
      <ProgressBar progress={part} accessibilityLabel={`Sending ${file.name}`} />
    </Card>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.xs },
  line: { flexDirection: "row", alignItems: "center", gap: space.xs },
  words: { flex: 1, minWidth: 0 },
  anywhere: { overflowWrap: "anywhere" } as object,
});
