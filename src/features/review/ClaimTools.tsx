import { useMutation, useQuery } from "@apollo/client/react";
import { useState } from "react";
import { View } from "react-native";

import { Button } from "@/components/Button";
import { RadioRows } from "@/components/CheckRow";
import { Confirm } from "@/components/Confirm";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Field } from "@/components/Field";
import { Sheet } from "@/components/Sheet";
import { Body, Dense } from "@/components/Text";
import { timeLeft } from "@/components/when";
import {
  HandOverClaimDocument,
  HandOverListDocument,
  LeavePaperDocument,
  type OutcomeFragment,
  ReleaseClaimDocument,
  RenewClaimDocument,
  type ReviewPartsFragment,
} from "~graphql/generated/graphql";
import { CLAIM_HOURS } from "~shared/review/states";
import { RECUSAL_REASON_LONGEST } from "~shared/review/recusal";

import type { ReviewActions } from "./useReview";

type Item = ReviewPartsFragment["item"];
type End = (send: () => Promise<OutcomeFragment | undefined>, done: string) => Promise<void>;

/** What can be done with a claim besides reading: lengthen it, hand it over, give it back, recuse oneself. */
export function ClaimTools({
  item,
  actions,
  end,
}: {
  item: Item;
  actions: ReviewActions;
  end: End;
}) {
  const { id } = item;
  const [asking, setAsking] = useState<"release" | "handOver" | "leave" | null>(null);
  const [release] = useMutation(ReleaseClaimDocument);
  const [renew] = useMutation(RenewClaimDocument);
  const close = () => setAsking(null);
  return (
    <View style={{ gap: 4 }} role="group" aria-label="Your claim">
      {item.claimedUntil ? (
        <Dense muted>{`Your claim ends in ${timeLeft(item.claimedUntil)}.`}</Dense>
      ) : null}
      <View style={{ flexDirection: "row", flexWrap: "wrap", columnGap: 8, marginLeft: -12 }}>
        {item.notRenewable ? null : (
          <Button
            kind="text"
            icon="timer-sand"
            label={`Hold it for ${CLAIM_HOURS} hours more`}
            onPress={() =>
              void actions.run(async () => (await renew({ variables: { id } })).data?.renewClaim)
            }
          />
        )}
        <Button kind="text" label="Hand over" onPress={() => setAsking("handOver")} />
        <Button kind="text" label="Release claim" onPress={() => setAsking("release")} />
        <Button kind="text" label="I can't judge this paper" onPress={() => setAsking("leave")} />
      </View>
      <Confirm
        visible={asking === "release"}
        title="Release the claim?"
        text="The submission goes back to the queue. What you typed and did not store is dropped."
        confirmLabel="Release it"
        onConfirm={() => {
          close();
          void end(
            async () => (await release({ variables: { id } })).data?.releaseClaim,
            "Another editor can claim it now; what you stored stays on record.",
          );
        }}
        onCancel={close}
      />
      {asking === "handOver" ? <HandOver id={id} onClose={close} end={end} /> : null}
      {asking === "leave" ? <LeavePaper item={item} onClose={close} end={end} /> : null}
    </View>
  );
}

function HandOver({ id, onClose, end }: { id: string; onClose: () => void; end: End }) {
  const [editorId, setEditorId] = useState<string | null>(null);
  const { data, loading, error, refetch } = useQuery(HandOverListDocument, {
    variables: { id },
    fetchPolicy: "network-only",
  });
  const [handOver] = useMutation(HandOverClaimDocument);
  const editors = data?.handOverList ?? [];
  const send = () => {
    if (editorId === null) return;
    onClose();
    void end(
      async () => (await handOver({ variables: { id, editorId } })).data?.handOverClaim,
      "They get a mail and read the paper on their own; what you stored stays on record.",
    );
  };
  return (
    <Sheet
      visible
      title="Hand it over"
      onClose={onClose}
      footer={
        editors.length === 0 ? undefined : (
          <Button
            kind="filled"
            label="Hand it over"
            disabledBecause={editorId === null ? "Choose an editor first." : undefined}
            onPress={send}
          />
        )
      }
    >
      <View style={{ gap: 12 }}>
        <Body>
          {`Another editor holds it for ${CLAIM_HOURS} hours then, and reads it blind. What you typed and did not store is dropped.`}
        </Body>
        {loading && !data ? <Loading label="Fetching the editors" /> : null}
        {error && !data ? <Failed error={error} onRetry={() => void refetch()} /> : null}
        {data && editors.length === 0 ? (
          <Body>
            No other editor can read it: each is an author of the paper, submitted it, or leaves it
            to others. Release the claim instead.
          </Body>
        ) : null}
        {editors.length > 0 ? (
          <RadioRows
            label="Editor"
            value={editorId}
            options={editors.map((editor) => ({ value: editor.id, label: editor.nameOnPapers }))}
            onChange={setEditorId}
          />
        ) : null}
      </View>
    </Sheet>
  );
}

/** An editor's word that they can't read a paper impartially; asked once, undone at the queue. */
export function LeavePaper({ item, onClose, end }: { item: Item; onClose: () => void; end: End }) {
  const [reason, setReason] = useState("");
  const [leave] = useMutation(LeavePaperDocument);
  const citationId = item.citation.id;
  const send = () => {
    onClose();
    void end(
      async () =>
        (await leave({ variables: { citationId, reason: reason.trim() || null } })).data
          ?.leavePaper,
      "You can take that back in the queue, under the papers you leave to others.",
    );
  };
  return (
    <Sheet
      visible
      title="Leave this paper to others?"
      onClose={onClose}
      footer={<Button kind="filled" label="Leave it to others" onPress={send} />}
    >
      <View style={{ gap: 16 }}>
        <Body>
          {
            "Say so when you can't read it impartially: you work with its authors, or compete with them. You can't claim or be handed any submission of this paper then."
          }
        </Body>
        <Field
          label="Reason"
          multiline
          rows={2}
          value={reason}
          onChangeText={setReason}
          maxLength={RECUSAL_REASON_LONGEST}
          hint="For yourself; nobody else reads it. Or leave it empty."
        />
      </View>
    </Sheet>
  );
}
