import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { StatusPill } from "@/components/StatusPill";
import { Caption, Label, Mono } from "@/components/Text";
import { dateTime, daysUntil, longDay } from "@/components/when";
import { useColors } from "@/theme/ThemeProvider";
import { space } from "@/theme/tokens";
import type { ApiTokenPartsFragment } from "~graphql/generated/graphql";
import { SCOPE_WORDS, TOKEN_SCOPES } from "~shared/review/tokenScopes";

/** Days before its end in which a token's row says so in ember. */
const SOON_DAYS = 14;

/** One token: what it is called, may do, and until when. */
export function ApiTokenRow({
  token,
  first,
  busy,
  onRevoke,
}: {
  token: ApiTokenPartsFragment;
  first: boolean;
  busy: boolean;
  onRevoke: () => void;
}) {
  const colors = useColors();
  const { name, scopes, start, state, createdAt, lastUsedAt } = token;
  const active = state === "active";
  const may = TOKEN_SCOPES.filter((scope) => scopes.includes(scope));
  return (
    <View
      role="listitem"
      style={[styles.row, { borderTopWidth: first ? 0 : 1, borderColor: colors.hairline }]}
    >
      <View style={styles.words}>
        <View style={styles.head}>
          <Label style={styles.name}>{name}</Label>
          {state === "active" ? null : <StatusPill state={state} />}
        </View>
        <Caption>
          <Mono>{`${start}…`}</Mono>
          {` · ${may.map((scope) => SCOPE_WORDS[scope].name).join(", ")}`}
        </Caption>
        <Caption>
          {`Made ${longDay(createdAt)} · ${lastUsedAt ? `last used ${dateTime(lastUsedAt)}` : "never used"}`}
        </Caption>
        <End token={token} />
      </View>
      {active ? (
        <Button
          kind="return"
          label="Revoke"
          accessibilityLabel={`Revoke ${name}`}
          busy={busy}
          onPress={onRevoke}
        />
      ) : null}
    </View>
  );
}

/** When it ends or ended; in ember when that is soon. */
function End({ token: { state, expiresAt, revokedAt } }: { token: ApiTokenPartsFragment }) {
  const colors = useColors();
  if (revokedAt) return <Caption>{`Revoked ${dateTime(revokedAt)}`}</Caption>;
  if (state === "expired") return <Caption>{`Ended ${dateTime(expiresAt)}`}</Caption>;
  const days = daysUntil(expiresAt);
  if (days > SOON_DAYS) return <Caption>{`Ends ${longDay(expiresAt)}`}</Caption>;
  const left = days < 1 ? "in less than a day" : days === 1 ? "in a day" : `in ${days} days`;
  return (
    <Caption style={{ color: colors.emberText }}>{`Ends ${longDay(expiresAt)}, ${left}`}</Caption>
  );
}

const styles = StyleSheet.create({
  row: {
    flexDirection: "row",
    flexWrap: "wrap",
    alignItems: "center",
    gap: space.s,
    paddingHorizontal: space.m,
    paddingVertical: space.s,
  },
  words: { flexGrow: 1, flexShrink: 1, flexBasis: 220, minWidth: 0, gap: 2 },
  head: { flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: space.xs },
  name: { flexShrink: 1 },
});
