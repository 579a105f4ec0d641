import { useQuery } from "@apollo/client/react";
import { useLocalSearchParams } from "expo-router";
import { View } from "react-native";

import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { DefinitionList } from "@/components/DefinitionList";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Notice } from "@/components/Notice";
import { dateTime } from "@/components/when";
import { Screen } from "@/layout/Screen";
import { ErrorReportDocument, type ErrorReportWholeFragment } from "~graphql/generated/graphql";

import { AnswerForm } from "./AnswerForm";
import { About, Trail } from "./ReportParts";

/** One report at the desk: what was reported, what was answered, and the next answer. */
export function ReportScreen() {
  const { id } = useLocalSearchParams<{ id: string }>();
  const { viewer, loading: fetching, hasRole } = useSession();
  const { data, loading, error, refetch } = useQuery(ErrorReportDocument, {
    variables: { id },
    skip: !viewer,
    fetchPolicy: "cache-and-network",
  });
  const report = data?.errorReport;
  return (
    <Screen
      title="Error report"
      documentTitle={report ? `Error report for ${report.quotable}` : undefined}
      back={hasRole("editor") || hasRole("maintainer") ? "/desk/reports" : "/desk"}
    >
      <View style={{ gap: 24, maxWidth: 760, width: "100%" }}>
        {fetching || (loading && !data) ? <Loading label="Fetching the report" /> : null}
        {error && !data ? <Failed error={error} onRetry={() => void refetch()} /> : null}
        {!fetching && !viewer ? (
          <Empty
            icon="lock-outline"
            title="Sign in first"
            text="Reports are read by editors, maintainers and whoever brought the record."
            action={
              <Button
                kind="filled"
                label="Sign in"
                href={`/account/sign-in?next=${encodeURIComponent(`/desk/reports/${id}`)}`}
              />
            }
          />
        ) : null}
        {viewer && data && !report ? (
          <Empty
            icon="alert-circle-outline"
            title="No such report"
            text="It may be about a record that you are reading blind: then it opens once your reading is stored."
            action={<Button kind="filled" label="To the desk" href="/desk" />}
          />
        ) : null}
        {report ? <Whole key={report.id} report={report} /> : null}
      </View>
    </Screen>
  );
}

function Whole({ report }: { report: ErrorReportWholeFragment }) {
  return (
    <>
      <View style={{ gap: 12 }}>
        <About report={report} />
        <DefinitionList
          items={[
            ...(report.closedAt ? [{ term: "Closed", value: dateTime(report.closedAt) }] : []),
            {
              term: "Answers go",
              value: report.mailed
                ? "by mail, and to the reporter's own page"
                : "to the reporter's own page; there is no mail address",
            },
          ]}
        />
      </View>
      <Trail
        text={report.text}
        reportedAt={report.reportedAt}
        entries={report.entries}
        reporter="The reporter"
      />
      {report.barredBecause ? (
        <Notice grade="note">{report.barredBecause}</Notice>
      ) : (
        <AnswerForm report={report} />
      )}
    </>
  );
}
