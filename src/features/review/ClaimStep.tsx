import { useState } from "react";
import { View } from "react-native";

import { Button } from "@/components/Button";
import { Notice } from "@/components/Notice";
import { Dense } from "@/components/Text";
import { dateTime } from "@/components/when";
import type { OutcomeFragment, ReviewPartsFragment } from "~graphql/generated/graphql";
import { CLAIM_HOURS } from "~shared/review/states";

import { LeavePaper } from "./ClaimTools";

const QUEUE = "/desk/queue";

/** Before the claim: the paper, and whether this editor may read it. */
export function ClaimStep({
  review,
  busy,
  onClaim,
  end,
}: {
  review: ReviewPartsFragment;
  busy: boolean;
  onClaim: () => void;
  end: (send: () => Promise<OutcomeFragment | undefined>, done: string) => Promise<void>;
}) {
  const { item } = review;
  const [leaving, setLeaving] = useState(false);
  const toQueue = <Button kind="tonal" label="To the queue" href={QUEUE} />;
  if (item.state === "approved" || item.state === "returned") {
    return (
      <Notice
        grade="note"
        title={
          item.state === "approved" ? "This revision is approved" : "This revision is returned"
        }
        action={toQueue}
      >
        It is decided; nothing is left to read.
      </Notice>
    );
  }
  if (item.barredBecause) {
    return (
      <Notice
        grade="caution"
        title="You can't read this one"
        action={
          item.leftToOthers ? (
            <Button
              kind="tonal"
              label="See the papers you leave to others"
              href={`${QUEUE}#left`}
            />
          ) : (
            toQueue
          )
        }
      >
        {item.barredBecause}
      </Notice>
    );
  }
  if (item.claimedUntil && !item.claimedByMe) {
    return (
      <Notice grade="note" title="Another editor is reading it" action={toQueue}>
        {`The claim ends on ${dateTime(item.claimedUntil)} unless it is decided before.`}
      </Notice>
    );
  }
  return (
    <View style={{ gap: 16 }}>
      <Dense style={{ fontSize: 16, lineHeight: 24 }}>
        {`A claim holds this submission for ${CLAIM_HOURS} hours. You read the paper and type its numbers before the submitted ones are shown to you.`}
      </Dense>
      <Button
        kind="filled"
        icon="eye-outline"
        label="Claim for a second reading"
        busy={busy}
        onPress={onClaim}
      />
      <View style={{ flexDirection: "row", marginLeft: -12 }}>
        <Button kind="text" label="I can't judge this paper" onPress={() => setLeaving(true)} />
      </View>
      {leaving ? <LeavePaper item={item} onClose={() => setLeaving(false)} end={end} /> : null}
    </View>
  );
}
