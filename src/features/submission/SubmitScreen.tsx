import { useQuery } from "@apollo/client/react";
import { useLocalSearchParams } from "expo-router";
import { View } from "react-native";

import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Notice } from "@/components/Notice";
import { StepBar } from "@/components/StepBar";
import { Screen } from "@/layout/Screen";
import { SubmissionByIdDocument } from "~graphql/generated/graphql";

import { CitationStep } from "./CitationStep";
import { DraftForm, STEP_WORDS } from "./DraftForm";
import { DESK, STEPS } from "./links";
import { SubmissionView } from "./SubmissionView";
import { useStartDraft } from "./useStartDraft";

/** A new constraint, a draft, or a submission under way. */
export function SubmitScreen() {
  const { id } = useLocalSearchParams<{ id: string }>();
  const { viewer, loading, hasRole } = useSession();
  if (loading) {
    return (
      <Screen title="New constraint" back={DESK}>
        <Loading label="Fetching your desk" />
      </Screen>
    );
  }
  if (!viewer) {
    return (
      <Screen title="New constraint" back={DESK}>
        <Empty
          icon="login"
          title="Sign in first"
          text="A constraint is submitted under a name."
          action={
            <Button
              kind="filled"
              label="Sign in"
              href={`/account/sign-in?next=${encodeURIComponent(`/desk/submit/${id}`)}`}
            />
          }
        />
      </Screen>
    );
  }
  if (id !== "new") return <Existing key={id} id={id} />;
  if (!hasRole("contributor")) {
    return (
      <Screen title="New constraint" back={DESK}>
        <Empty
          icon="lock-outline"
          title="Contributors submit constraints"
          text="Your account has no contributor role yet. A maintainer grants it; the desk says how."
          action={<Button kind="filled" label="To the desk" href={DESK} />}
        />
      </Screen>
    );
  }
  return <NewDraft />;
}

function NewDraft() {
  const start = useStartDraft();
  return (
    <Screen title="The paper" subtitle="New constraint" back={DESK}>
      <View style={{ gap: 24, maxWidth: 760 }}>
        <StepBar
          label="Steps of the submission"
          steps={STEPS.map((key) => ({ key, label: STEP_WORDS[key], closed: key !== "paper" }))}
          current="paper"
        />
        {start.refusal ? <Notice grade="error">{start.refusal}</Notice> : null}
        <CitationStep
          current={null}
          busy={start.busy}
          onChosen={(citation) => void start.ofPaper(citation.id)}
        />
      </View>
    </Screen>
  );
}

function Existing({ id }: { id: string }) {
  const { data, loading, error, refetch } = useQuery(SubmissionByIdDocument, {
    variables: { id },
    // A draft saved in another window must not be edited from an old copy.
    fetchPolicy: "network-only",
    nextFetchPolicy: "cache-first",
  });
  const submission = data?.submission;
  if (submission?.state === "draft") return <DraftForm submission={submission} />;
  if (submission) return <SubmissionView submission={submission} />;
  return (
    <Screen title="Submission" back={DESK}>
      {loading ? (
        <Loading label="Fetching the submission" />
      ) : error ? (
        <Failed error={error} onRetry={() => void refetch()} />
      ) : (
        <Empty
          icon="help-circle-outline"
          title="No such submission"
          text="It may belong to another account, or the address is mistyped."
          action={<Button kind="filled" label="To the desk" href={DESK} />}
        />
      )}
    </Screen>
  );
}
