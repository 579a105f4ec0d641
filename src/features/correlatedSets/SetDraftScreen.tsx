import { useMutation, useQuery } from "@apollo/client/react";
import { useLocalSearchParams, useRouter } from "expo-router";
import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { Confirm } from "@/components/Confirm";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Notice } from "@/components/Notice";
import { Screen } from "@/layout/Screen";
import { space } from "@/theme/tokens";
import {
  type CorrelatedSetPartsFragment,
  CorrelatedSetByNumberDocument,
  DiscardSetDocument,
  ReviseSetDocument,
} from "~graphql/generated/graphql";

import { RolePage } from "./Gate";
import { SetForm } from "./SetForm";

/** A contributor's set: typed, checked while it is typed, sent to the editors. */
export function SetDraftScreen() {
  const { number } = useLocalSearchParams<{ number: string }>();
  return (
    <RolePage
      title="Correlated set"
      role="contributor"
      here={`/desk/sets/${number}`}
      because="Contributors submit correlated sets"
    >
      {() => <Loaded key={number} number={number} />}
    </RolePage>
  );
}

function Loaded({ number }: { number: string }) {
  const { data, loading, error, refetch } = useQuery(CorrelatedSetByNumberDocument, {
    variables: { number },
    fetchPolicy: "network-only",
    nextFetchPolicy: "cache-first",
  });
  const set = data?.correlatedSet;
  if (set?.mine && set.state === "draft") {
    return <SetForm key={set.version} set={set} onReload={() => void refetch()} />;
  }
  return (
    <Screen title="Correlated set" documentTitle={number} subtitle={number} back="/desk">
      {set?.mine ? (
        <Decided set={set} onReload={() => void refetch()} />
      ) : error ? (
        <Failed error={error} onRetry={() => void refetch()} />
      ) : loading ? (
        <Loading label={`Fetching ${number}`} />
      ) : (
        <Empty
          icon="help-circle-outline"
          title={`No set ${number} of yours`}
          text="It may belong to somebody else, or have been discarded."
          action={<Button kind="tonal" label="To the desk" href="/desk" />}
        />
      )}
    </Screen>
  );
}

/** What can be done with a set that is no draft: read the comment, answer it. */
function Decided({ set, onReload }: { set: CorrelatedSetPartsFragment; onReload: () => void }) {
  const router = useRouter();
  const [revise, { loading }] = useMutation(ReviseSetDocument);
  const [discard] = useMutation(DiscardSetDocument);
  const [problem, setProblem] = useState<string | null>(null);
  const [asking, setAsking] = useState(false);
  const words: Record<string, string> = {
    submitted: "It waits for an editor's second reading. It can't be changed now.",
    inReview: "An editor is reading it. It can't be changed now.",
    returned: "An editor returned it. The answer is a new set, begun from this one.",
    approved: "It is approved and in use. A correction is a new set, begun from this one.",
    withdrawn: "It is withdrawn. A correction is a new set, begun from this one.",
  };
  const answer = async () => {
    setProblem(null);
    try {
      const outcome = (await revise({ variables: { number: set.number } })).data?.reviseSet;
      if (outcome?.__typename === "CorrelatedSet") {
        router.replace(`/desk/sets/${outcome.number}` as never);
      } else setProblem(outcome?.message ?? "The server gave no answer. Try again.");
    } catch (thrown) {
      setProblem(userMessage(thrown));
    }
  };
  const takeBack = async () => {
    setAsking(false);
    try {
      const outcome = (await discard({ variables: { number: set.number, version: set.version } }))
        .data?.discardSet;
      if (outcome?.__typename === "Done") router.replace("/desk" as never);
      else setProblem(outcome?.message ?? "The server gave no answer. Try again.");
    } catch (thrown) {
      setProblem(userMessage(thrown));
    }
  };
  const decided = ["returned", "approved", "withdrawn"].includes(set.state);
  return (
    <View style={styles.page}>
      <Notice
        grade={set.state === "returned" ? "mustAnswer" : "note"}
        title={set.state === "returned" ? "Returned with a comment" : undefined}
      >
        {set.state === "returned" && set.decisionNote
          ? `“${set.decisionNote}” ${words.returned}`
          : (words[set.state] ?? "It was discarded.")}
      </Notice>
      {problem ? (
        <Notice
          grade="error"
          action={<Button kind="tonal" icon="refresh" label="Reload" onPress={onReload} />}
        >
          {problem}
        </Notice>
      ) : null}
      <View style={styles.line}>
        {decided ? (
          <Button
            kind="filled"
            label={set.state === "returned" ? "Answer it" : "Correct it"}
            busy={loading}
            onPress={() => void answer()}
          />
        ) : null}
        <Button kind="outline" label="See the set" href={`/sets/${set.number}`} />
        {set.state === "submitted" ? (
          <Button kind="text" label="Take it back" onPress={() => setAsking(true)} />
        ) : null}
      </View>
      <Confirm
        visible={asking}
        title="Take the set back?"
        text="It leaves the editors' queue and is discarded."
        confirmLabel="Take it back"
        onConfirm={() => void takeBack()}
        onCancel={() => setAsking(false)}
      />
    </View>
  );
}

const styles = StyleSheet.create({
  page: { gap: space.m, maxWidth: 720 },
  line: { flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: space.xs },
});
