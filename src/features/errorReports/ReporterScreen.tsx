import { useMutation, useQuery } from "@apollo/client/react";
import { useLocalSearchParams } from "expo-router";
import { useState } from "react";
import { View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Dense, Section } from "@/components/Text";
import { Screen } from "@/layout/Screen";
import {
  ReplyToReportDocument,
  ReportedErrorDocument,
  type ReportedErrorPartsFragment,
} from "~graphql/generated/graphql";
import { MESSAGE_LENGTH } from "~shared/review/errorReport";

import { About, Trail } from "./ReportParts";

/** What became of a report, for whoever has its link; the reporter may add one reply. */
export function ReporterScreen() {
  const { token } = useLocalSearchParams<{ token: string }>();
  const { data, loading, error, refetch } = useQuery(ReportedErrorDocument, {
    variables: { token },
    fetchPolicy: "network-only",
  });
  const [replied, setReplied] = useState<ReportedErrorPartsFragment | null>(null);
  const report = replied ?? data?.reportedError;
  return (
    <Screen title="Your error report" back="/constraints">
      <View style={{ gap: 24, maxWidth: 760, width: "100%" }}>
        {loading && !data ? <Loading label="Fetching the report" /> : null}
        {error && !data ? <Failed error={error} onRetry={() => void refetch()} /> : null}
        {data && !report ? (
          <Empty
            icon="link-variant"
            title="This link opens no report"
            text="Open the whole link from the mail; it ends with a long token."
            action={<Button kind="filled" label="See the constraints" href="/constraints" />}
          />
        ) : null}
        {report ? (
          <>
            <About report={report} />
            <Trail
              text={report.text}
              reportedAt={report.reportedAt}
              entries={report.entries}
              reporter="You"
            />
            {report.mayReply ? (
              <Reply token={token} onReplied={setReplied} />
            ) : (
              <Dense muted>
                {report.entries.some(({ by }) => by === null)
                  ? "You have replied; the editors read it."
                  : "Once the editors have answered, you can reply here."}
              </Dense>
            )}
          </>
        ) : null}
      </View>
    </Screen>
  );
}

function Reply({
  token,
  onReplied,
}: {
  token: string;
  onReplied: (report: ReportedErrorPartsFragment) => void;
}) {
  const [text, setText] = useState("");
  const [problem, setProblem] = useState<string | null>(null);
  const [reply, { loading }] = useMutation(ReplyToReportDocument);
  const send = async () => {
    setProblem(null);
    try {
      const result = (await reply({ variables: { token, text } })).data?.replyToReport;
      if (result?.__typename === "ReportedError") onReplied(result);
      else setProblem(result?.message ?? "The server gave no answer. Try again.");
    } catch (error) {
      setProblem(userMessage(error));
    }
  };
  return (
    <View style={{ gap: 16 }}>
      <Section>Reply</Section>
      <Field
        name="reply"
        label="Your reply"
        multiline
        value={text}
        onChangeText={setText}
        maxLength={MESSAGE_LENGTH.longest}
        hint="One reply can be given; it opens the report again."
      />
      <Button
        kind="filled"
        icon="send-outline"
        label="Send the reply"
        busy={loading}
        onPress={() => void send()}
      />
      {problem ? <Notice grade="error">{problem}</Notice> : null}
    </View>
  );
}
