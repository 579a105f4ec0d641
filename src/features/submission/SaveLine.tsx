import { View } from "react-native";

import { Button } from "@/components/Button";
import { Notice } from "@/components/Notice";
import { Caption } from "@/components/Text";
import { clockTime, dateTime } from "@/components/when";

import type { DraftKeeper, SaveState } from "./draftKeeper";

/** Whether what was typed is safe, in a few words. */
export function SaveLine({ save }: { save: SaveState }) {
  return (
    <View role="status" aria-live="polite">
      <Caption>{saveWords(save)}</Caption>
    </View>
  );
}

export function saveWords(save: SaveState): string {
  switch (save.kind) {
    case "saved":
      return `Saved ${clockTime(save.at)}`;
    case "waiting":
    case "saving":
      return "Saving";
    case "offline":
      return "No connection; kept here";
    case "signedOut":
      return "Signed out; kept here";
    case "refused":
      return "Not saved; kept here";
    case "stale":
      return "Two versions";
  }
}

/** What stands in the way of saving, with the ways on. */
export function SaveTrouble({
  save,
  keeper,
  here,
}: {
  save: SaveState;
  keeper: DraftKeeper;
  here: string;
}) {
  switch (save.kind) {
    case "stale":
      return (
        <Notice
          grade="mustAnswer"
          title={`A newer version was saved on ${dateTime(save.newer.updatedAt)}`}
          action={
            <View style={{ flexDirection: "row", flexWrap: "wrap", gap: 8 }}>
              <Button kind="tonal" label="See the newer one" onPress={keeper.takeNewer} />
              <Button kind="outline" label="Keep mine" onPress={() => void keeper.keepMine()} />
            </View>
          }
        >
          This draft was changed in another window. Seeing the newer one drops what you typed here;
          keeping yours writes it over the newer one.
        </Notice>
      );
    case "offline":
      return (
        <Notice
          grade="caution"
          title="No connection to the server"
          action={
            <Button
              kind="tonal"
              icon="refresh"
              label="Save now"
              onPress={() => void keeper.flush()}
            />
          }
        >
          What you type is kept in this browser and is sent when the connection is back.
        </Notice>
      );
    case "signedOut":
      return (
        <Notice
          grade="caution"
          title="You are signed out"
          action={
            <Button
              kind="tonal"
              icon="login"
              label="Sign in"
              href={`/account/sign-in?next=${encodeURIComponent(here)}`}
            />
          }
        >
          What you typed is kept in this browser and is saved after you sign in again.
        </Notice>
      );
    case "refused":
      return (
        <Notice grade="error" title="The draft was not saved">
          {save.message}
        </Notice>
      );
    default:
      return null;
  }
}
