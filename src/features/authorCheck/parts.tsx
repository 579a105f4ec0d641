import { View } from "react-native";

import { Card } from "@/components/Card";
import { Body, Caption, Dense, Label } from "@/components/Text";
import { dateTime } from "@/components/when";
import type { AuthorCheckLinePartsFragment } from "~graphql/generated/graphql";
import type { CheckState, CheckVerdict } from "~shared/review/authorCheck";

export const VERDICT_WORDS: Record<CheckVerdict, string> = {
  correct: "Correct",
  comments: "Comments",
};

/** Where a check stands, in a few words. */
export function standingWords(check: {
  state: CheckState;
  verdict?: CheckVerdict | null;
  expired: boolean;
}): string {
  const { state, verdict, expired } = check;
  if (state === "revoked") return "taken back";
  if (state === "sent") return expired ? "not answered, the link has run out" : "not answered yet";
  const said = verdict === "correct" ? "called correct" : "commented";
  if (state === "closed") return `${said}, closed`;
  return verdict === "correct" ? said : "comments wait for you";
}

/** What the author and the editors wrote, oldest first, as it was typed. */
export function Lines({
  lines,
  author,
}: {
  lines: readonly AuthorCheckLinePartsFragment[];
  /** How the author is called on this page. */
  author: string;
}) {
  if (lines.length === 0) return null;
  return (
    <View role="list" aria-label="Answers" style={{ gap: 12 }}>
      {lines.map(({ id, by, verdict, text, at }) => (
        <View role="listitem" key={id}>
          <Card style={{ gap: 8 }}>
            <View style={{ flexDirection: "row", flexWrap: "wrap", columnGap: 12 }}>
              <Label>{by ?? author}</Label>
              <Caption>{dateTime(at)}</Caption>
            </View>
            {verdict ? <Dense style={{ fontWeight: "600" }}>{VERDICT_WORDS[verdict]}</Dense> : null}
            {text ? (
              <Body style={{ whiteSpace: "pre-line", overflowWrap: "anywhere" } as never}>
                {text}
              </Body>
            ) : null}
          </Card>
        </View>
      ))}
    </View>
  );
}
