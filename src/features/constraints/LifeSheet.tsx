import { useMutation } from "@apollo/client/react";
import { useState } from "react";

import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Segments } from "@/components/Segments";
import { Sheet } from "@/components/Sheet";
import { RecordPicker } from "@/components/statement/RecordPicker";
import { Dense } from "@/components/Text";
import {
  LiftNoticeDocument,
  RecordErratumDocument,
  SupersedeRecordDocument,
  WithdrawRecordDocument,
  type NoticePartsFragment,
} from "~graphql/generated/graphql";
import type { RecordState } from "~shared/review/states";
import { NOTICE_REASON, type NoticeKind } from "~shared/review/notice";

const KINDS: readonly { value: NoticeKind; label: string }[] = [
  { value: "erratum", label: "Erratum" },
  { value: "superseded", label: "Superseded" },
  { value: "withdrawn", label: "Withdrawn" },
];

const FOLLOWS: Record<NoticeKind, string> = {
  erratum:
    "The record stays current and in use. The notice stands over it until a new revision corrects it.",
  superseded:
    "The record stays listed with this state, and is left out of History and of new tables unless somebody takes it in with a reason.",
  withdrawn:
    "The record stays readable at its address, and disappears from lists, History, downloads and new tables.",
};

const DO: Record<NoticeKind, string> = {
  erratum: "Record the erratum",
  superseded: "Mark as superseded",
  withdrawn: "Withdraw the record",
};

/** What a sheet is open for: a new notice, or one that is taken back. */
export type LifeTask = { kind: "record" } | { kind: "takeBack"; notice: NoticePartsFragment };

/** A maintainer's steps in the life of a record. Each asks for a reason and can be taken back. */
export function LifeSheet({
  task,
  number,
  state,
  onClose,
  onDone,
}: {
  task: LifeTask | null;
  number: string;
  state: RecordState;
  onClose: () => void;
  onDone: () => void;
}) {
  const [kind, setKind] = useState<NoticeKind>("erratum");
  const [reason, setReason] = useState("");
  const [replacedBy, setReplacedBy] = useState<string[]>([]);
  const [refusal, setRefusal] = useState<{ message: string; field: string | null } | null>(null);
  const [erratum, recording] = useMutation(RecordErratumDocument);
  const [supersede, superseding] = useMutation(SupersedeRecordDocument);
  const [withdraw, withdrawing] = useMutation(WithdrawRecordDocument);
  const [lift, lifting] = useMutation(LiftNoticeDocument);
  const busy = [recording, superseding, withdrawing, lifting].some(({ loading }) => loading);
  const at = (field: string) => (refusal?.field === field ? refusal.message : undefined);
  const back = task?.kind === "takeBack" ? task.notice : null;
  const missing =
    reason.trim().length < NOTICE_REASON.shortest
      ? "Write the reason first: it stands with the record for good."
      : !back && kind === "superseded" && replacedBy.length === 0
        ? "Choose the record in its place first."
        : null;

  async function outcome() {
    const variables = { number, reason };
    if (back) {
      const { data } = await lift({ variables: { notice: back.id, reason } });
      return data?.liftNotice;
    }
    if (kind === "erratum") return (await erratum({ variables })).data?.recordErratum;
    if (kind === "withdrawn") return (await withdraw({ variables })).data?.withdrawRecord;
    const [replacement = ""] = replacedBy;
    const { data } = await supersede({ variables: { ...variables, replacedBy: replacement } });
    return data?.supersedeRecord;
  }

  async function send() {
    setRefusal(null);
    try {
      const result = await outcome();
      if (result?.__typename === "RecordLife") {
        setReason("");
        setReplacedBy([]);
        onDone();
      } else {
        setRefusal({
          message: result?.message ?? "The server gave no answer. Try again.",
          field: result?.field ?? null,
        });
      }
    } catch (error) {
      setRefusal({ message: userMessage(error), field: null });
    }
  }

  return (
    <Sheet
      visible={task !== null}
      title={back ? `Take it back: ${number}` : `Change the state of ${number}`}
      onClose={onClose}
      footer={
        <Button
          label={back ? "Take it back" : DO[kind]}
          kind="filled"
          busy={busy}
          disabledBecause={missing ?? undefined}
          onPress={() => void send()}
        />
      }
    >
      {back ? (
        <Dense>
          The notice stays on record as taken back, with your reason. The state of the record
          follows from the notices that still hold.
        </Dense>
      ) : (
        <>
          <Segments
            label="What is recorded"
            value={kind}
            options={KINDS}
            onChange={(value) => setKind(value as NoticeKind)}
          />
          <Dense muted>{FOLLOWS[kind]}</Dense>
          {kind === "superseded" ? (
            <RecordPicker
              label="Record in its place"
              single
              values={replacedBy}
              onChange={setReplacedBy}
              error={at("replacedBy")}
            />
          ) : null}
        </>
      )}
      <Field
        label="Reason"
        name="reason"
        value={reason}
        onChangeText={setReason}
        multiline
        maxLength={NOTICE_REASON.longest}
        error={at("reason")}
        hint="Public, with your name and the date. Its contributor is told by mail, and so is who keeps it in a fitting table."
      />
      {refusal && !["reason", "replacedBy"].includes(refusal.field ?? "") ? (
        <Notice grade="error">{refusal.message}</Notice>
      ) : null}
      {!back && state === "withdrawn" ? (
        <Notice grade="note">
          It is withdrawn. Take that back before recording anything else.
        </Notice>
      ) : null}
    </Sheet>
  );
}
