import { StyleSheet, View } from "react-native";
import type { ReportState } from "~shared/review/errorReport";
import type { RecordState, RevisionState } from "~shared/review/states";
import type { TokenState } from "~shared/review/tokenScopes";
import { useColors } from "@/theme/ThemeProvider";
import { radius } from "@/theme/tokens";
import Icon, { type IconName } from "./Icon";
import { Label } from "./Text";

type AnyState = RevisionState | RecordState | ReportState | Exclude<TokenState, "active">;

const QUIET = new Set<AnyState>(["draft", "discarded", "superseded", "expired", "revoked"]);

const STATES: Record<AnyState, { word: string; icon: IconName }> = {
  draft: { word: "Draft", icon: "pencil-outline" },
  submitted: { word: "Submitted", icon: "tray-arrow-up" },
  inReview: { word: "In review", icon: "eye-outline" },
  returned: { word: "Returned", icon: "keyboard-return" },
  approved: { word: "Approved", icon: "check-circle" },
  discarded: { word: "Discarded", icon: "delete-outline" },
  current: { word: "Approved", icon: "check-circle" },
  superseded: { word: "Superseded", icon: "page-next-outline" },
  open: { word: "Open", icon: "clock-outline" },
  answered: { word: "Answered", icon: "comment-text-outline" },
  closed: { word: "Closed", icon: "check-all" },
  withdrawn: { word: "Withdrawn", icon: "cancel" },
  expired: { word: "Expired", icon: "clock-outline" },
  revoked: { word: "Revoked", icon: "cancel" },
};

/** State of a revision or record: icon and word. Approved is tinted, since it is no button. */
export function StatusPill({ state }: { state: AnyState }) {
  const colors = useColors();
  const { word, icon } = STATES[state];
  const tinted = state === "approved" || state === "current";
  const waits = state === "returned" || state === "open";
  const active = state === "submitted" || state === "inReview" || state === "answered" || tinted;
  const text = waits ? colors.emberText : active ? colors.primary : colors.ink;
  const quiet = QUIET.has(state);
  return (
    <View
      style={[
        styles.pill,
        {
          backgroundColor: tinted ? colors.petrolTint : waits ? colors.emberTint : colors.surface,
          borderColor: tinted
            ? colors.petrolTint
            : waits
              ? colors.emberTint
              : active
                ? colors.primary
                : quiet
                  ? colors.outline
                  : colors.ink,
        },
      ]}
    >
      <Icon name={icon} size={15} color={quiet ? colors.muted : text} />
      <Label style={[styles.word, { color: quiet ? colors.muted : text }]}>{word}</Label>
    </View>
  );
}

const styles = StyleSheet.create({
  pill: {
    height: 26,
    borderRadius: radius.pill,
    borderWidth: 1,
    paddingHorizontal: 10,
    flexDirection: "row",
    alignItems: "center",
    alignSelf: "flex-start",
    gap: 5,
  },
  word: { fontSize: 13, lineHeight: 18 },
});
