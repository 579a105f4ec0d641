import { useMutation, useQuery } from "@apollo/client/react";
import { useState } from "react";
import { View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Choice } from "@/components/Choice";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { SetQueue } from "@/components/setQueue/SetQueue";
import { Block, Caption, Dense } from "@/components/Text";
import { longDay } from "@/components/when";
import { useColors } from "@/theme/ThemeProvider";
import {
  PapersLeftDocument,
  type PapersLeftQuery,
  ReviewQueueDocument,
  TakePaperBackDocument,
} from "~graphql/generated/graphql";

import { DeskPage } from "@/components/DeskPage";
import { counted, PART_WORDS, partOf, QUEUE_PARTS, searched } from "./queueFilter";
import { QueueRows } from "./QueueRows";
import { useSearch } from "@/components/useSearch";

/** Everything that waits for an editor, searched and narrowed. */
export function QueueScreen() {
  return (
    <DeskPage title="Queue" subtitle="Submissions, oldest first" here="/desk/queue" role="editor">
      <Whole />
      <SetQueue />
      <PapersLeft />
    </DeskPage>
  );
}

function Whole() {
  const search = useSearch(QUEUE_PARTS, "all");
  const { data, loading, error, refetch } = useQuery(ReviewQueueDocument, {
    fetchPolicy: "cache-and-network",
  });
  const all = data?.queue ?? [];
  const found = searched(all, search.typed);
  const counts = counted(found);
  const shown = found.filter((item) => search.part === "all" || partOf(item) === search.part);
  if (loading && !data) return <Loading label="Fetching the queue" />;
  if (error && !data) return <Failed error={error} onRetry={() => void refetch()} />;
  if (all.length === 0) {
    return (
      <Empty
        icon="check-all"
        title="Nothing waits"
        text="Every submission is decided. A mail tells you when the next one comes."
        action={<Button kind="tonal" label="To the desk" href="/desk" />}
      />
    );
  }
  return (
    <>
      <Field
        name="search"
        label="Search by author, title, number or place"
        value={search.typed}
        onChangeText={search.setTyped}
        inputMode="search"
        autoComplete="off"
        maxLength={200}
      />
      <Choice
        label="Show"
        value={search.part}
        options={QUEUE_PARTS.map((part) => ({
          value: part,
          label: `${PART_WORDS[part]}, ${counts[part]}`,
        }))}
        onChange={(part) => search.setPart((part ?? "all") as (typeof QUEUE_PARTS)[number])}
      />
      {shown.length === 0 ? (
        <Empty
          icon="magnify"
          title="No submission is like this"
          text="Search for a part of a name or a title, or show all."
          action={<Button kind="tonal" label="Show the whole queue" onPress={search.clear} />}
        />
      ) : (
        <QueueRows
          title={search.part === "all" ? "Submissions" : PART_WORDS[search.part]}
          rows={shown}
          level={2}
        />
      )}
    </>
  );
}

/** Papers that this editor said not to judge, each with the way back. */
function PapersLeft() {
  const { data, error, refetch } = useQuery(PapersLeftDocument, {
    fetchPolicy: "cache-and-network",
  });
  if (error && !data) return <Failed error={error} onRetry={() => void refetch()} />;
  const papers = data?.papersLeft ?? [];
  if (papers.length === 0) return null;
  return (
    <View style={{ gap: 8 }} nativeID="left">
      <Block level={2}>{`Papers you leave to others, ${papers.length}`}</Block>
      <Card flush>
        <View role="list" aria-label="Papers you leave to others">
          {papers.map((paper, index) => (
            <LeftPaper key={paper.citation.id} paper={paper} first={index === 0} />
          ))}
        </View>
      </Card>
    </View>
  );
}

function LeftPaper({
  paper: { citation, reason, at },
  first,
}: {
  paper: PapersLeftQuery["papersLeft"][number];
  first: boolean;
}) {
  const colors = useColors();
  const [problem, setProblem] = useState<string | null>(null);
  const [takeBack, { loading }] = useMutation(TakePaperBackDocument, {
    refetchQueries: [PapersLeftDocument, ReviewQueueDocument],
    awaitRefetchQueries: true,
  });
  const back = async () => {
    setProblem(null);
    try {
      const { data } = await takeBack({ variables: { citationId: citation.id } });
      const outcome = data?.takePaperBack;
      if (outcome?.__typename !== "Done") {
        setProblem(outcome?.message ?? "The server gave no answer. Try again.");
      }
    } catch (error) {
      setProblem(userMessage(error));
    }
  };
  return (
    <View
      role="listitem"
      style={{
        borderTopWidth: first ? 0 : 1,
        borderColor: colors.hairline,
        paddingHorizontal: 16,
        paddingVertical: 12,
        gap: 4,
      }}
    >
      <Dense style={{ fontWeight: "600" }}>{citation.shortName}</Dense>
      <Dense muted numberOfLines={2}>
        {citation.title}
      </Dense>
      <Caption>{`Since ${longDay(at)}${reason ? `: ${reason}` : ""}`}</Caption>
      {problem ? <Notice grade="error">{problem}</Notice> : null}
      <View style={{ flexDirection: "row", marginLeft: -12 }}>
        <Button
          kind="text"
          icon="undo"
          label="I can judge it again"
          accessibilityLabel={`I can judge ${citation.shortName} again`}
          busy={loading}
          onPress={() => void back()}
        />
      </View>
    </View>
  );
}
