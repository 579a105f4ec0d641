import { useMutation, useQuery } from "@apollo/client/react";
import { useEffect, useRef, useState } from "react";
import { StyleSheet, View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Confirm } from "@/components/Confirm";
import { Failed } from "@/components/feedback/Failed";
import { Field } from "@/components/Field";
import { FilePick } from "@/components/FilePick";
import { Notice } from "@/components/Notice";
import { Dense } from "@/components/Text";
import { space } from "@/theme/tokens";
import {
  DescribeEvidenceDocument,
  EvidenceDocument,
  type EvidencePartsFragment,
  RemoveEvidenceDocument,
} from "~graphql/generated/graphql";
import { bytesInWords, EVIDENCE_ACCEPT, EVIDENCE_LIMITS } from "~shared/evidence/evidence";

import { Arriving } from "./Arriving";
import { EvidenceFile } from "./EvidenceFile";
import { useSending } from "./useSending";

const REST_MS = 800;

/** The files of a draft: choose, say what each shows, remove. They are kept at once, without saving. */
export function AttachEvidence({ revisionId, number }: { revisionId: string; number: string }) {
  const { data, error, refetch } = useQuery(EvidenceDocument, {
    variables: { number },
    fetchPolicy: "cache-and-network",
  });
  const files = data?.evidence ?? [];
  const sending = useSending(revisionId, () => void refetch());
  const room = EVIDENCE_LIMITS.files - files.length - sending.arriving.length;

  return (
    <View style={styles.all}>
      <Dense muted>
        A page, figure or table that shows the numbers: PDF, PNG, JPEG or CSV. The editors see it
        after their own reading; it is never passed on.
      </Dense>
      {error && !data ? <Failed error={error} onRetry={() => void refetch()} /> : null}
      {files.map((file) => (
        <Card key={file.id ?? file.digest}>
          <OwnFile file={file} onChanged={() => void refetch()} />
        </Card>
      ))}
      {sending.arriving.map((one) => (
        <Arriving
          key={one.key}
          sent={one}
          onStop={() => sending.stop(one.key)}
          onAgain={() => sending.again(one.key)}
        />
      ))}
      {room > 0 ? (
        <FilePick
          label={files.length === 0 ? "Attach a file" : "Attach another file"}
          accept={EVIDENCE_ACCEPT}
          onFiles={(chosen) => sending.send(chosen.slice(0, room))}
        />
      ) : (
        <Dense
          muted
        >{`${EVIDENCE_LIMITS.files} files are the most. Remove one to attach another.`}</Dense>
      )}
      <Dense muted>{`At most ${bytesInWords(EVIDENCE_LIMITS.bytes)} each.`}</Dense>
    </View>
  );
}

function OwnFile({ file, onChanged }: { file: EvidencePartsFragment; onChanged: () => void }) {
  const [asking, setAsking] = useState(false);
  const [problem, setProblem] = useState<string | null>(null);
  const [remove, removing] = useMutation(RemoveEvidenceDocument);
  const id = file.id ?? "";
  const name = file.name ?? "the file";

  const takeOff = async () => {
    setAsking(false);
    setProblem(null);
    try {
      const outcome = (await remove({ variables: { id } })).data?.removeEvidence;
      if (outcome?.__typename === "Done") onChanged();
      else setProblem(outcome?.message ?? "The server gave no answer. Try again.");
    } catch (failure) {
      setProblem(userMessage(failure));
    }
  };

  return (
    <EvidenceFile file={file}>
      <Caption file={file} onProblem={setProblem} />
      {problem ? <Notice grade="error">{problem}</Notice> : null}
      <View style={styles.actions}>
        <Button
          kind="text"
          icon="delete-outline"
          label="Remove"
          accessibilityLabel={`Remove ${name}`}
          busy={removing.loading}
          onPress={() => setAsking(true)}
        />
      </View>
      <Confirm
        visible={asking}
        title={`Remove ${name}?`}
        text="It is taken off this draft. Earlier revisions that were submitted with it keep it."
        confirmLabel="Remove"
        onConfirm={() => void takeOff()}
        onCancel={() => setAsking(false)}
      />
    </EvidenceFile>
  );
}

/** What the file shows; kept when typing rests and when the field is left. */
function Caption({
  file,
  onProblem,
}: {
  file: EvidencePartsFragment;
  onProblem: (problem: string | null) => void;
}) {
  const [describe] = useMutation(DescribeEvidenceDocument);
  const [text, setText] = useState(file.caption ?? "");
  const kept = useRef(file.caption ?? "");
  const keep = async () => {
    if (text.trim() === kept.current) return;
    const before = kept.current;
    kept.current = text.trim();
    try {
      const variables = { id: file.id ?? "", caption: text };
      const outcome = (await describe({ variables })).data?.describeEvidence;
      if (outcome?.__typename === "Evidence") return onProblem(null);
      kept.current = before;
      onProblem(outcome?.message ?? "The server gave no answer. Try again.");
    } catch (failure) {
      kept.current = before;
      onProblem(userMessage(failure));
    }
  };
  useEffect(() => {
    if (text.trim() === kept.current) return undefined;
    const timer = setTimeout(() => void keep(), REST_MS);
    return () => clearTimeout(timer);
    // Only typing starts the clock.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [text]);
  return (
    <Field
      label="What it shows"
      value={text}
      onChangeText={setText}
      onBlur={() => void keep()}
      maxLength={EVIDENCE_LIMITS.caption}
    />
  );
}

const styles = StyleSheet.create({
  all: { gap: space.s },
  actions: { flexDirection: "row", marginLeft: -space.s },
});
