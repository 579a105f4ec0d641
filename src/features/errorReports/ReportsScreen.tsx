import { useQuery } from "@apollo/client/react";
import { useLocalSearchParams, useRouter } from "expo-router";
import { useEffect, useState } from "react";
import { View } from "react-native";

import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Field } from "@/components/Field";
import { ListRow } from "@/components/ListRow";
import { StatusPill } from "@/components/StatusPill";
import { Block, Caption, Dense, Mono } from "@/components/Text";
import { dateTime, waitingTime } from "@/components/when";
import { Screen } from "@/layout/Screen";
import { type ErrorReportItemFragment, ErrorReportsDocument } from "~graphql/generated/graphql";

import { standing } from "./ReportParts";

const SEARCH_DELAY_MS = 300;

/** Errors that readers reported: those that wait first, the oldest on top. */
export function ReportsScreen() {
  const { viewer, loading, hasRole } = useSession();
  const allowed = hasRole("editor") || hasRole("maintainer");
  return (
    <Screen title="Error reports" subtitle="What readers find wrong with a record" back="/desk">
      <View style={{ gap: 16, maxWidth: 860, width: "100%" }}>
        {loading ? (
          <Loading label="Fetching your account" />
        ) : allowed ? (
          <Reports />
        ) : (
          <Empty
            icon="lock-outline"
            title={viewer ? "Editors and maintainers only" : "Sign in first"}
            text={
              viewer
                ? "Your account has neither role. Reports of your own records reach you by mail."
                : "This page is for the editors and maintainers of the registry."
            }
            action={
              viewer ? (
                <Button kind="filled" label="To the desk" href="/desk" />
              ) : (
                <Button
                  kind="filled"
                  label="Sign in"
                  href="/account/sign-in?next=%2Fdesk%2Freports"
                />
              )
            }
          />
        )}
      </View>
    </Screen>
  );
}

function Reports() {
  const router = useRouter();
  const { q = "" } = useLocalSearchParams<{ q?: string }>();
  const [typed, setTyped] = useState(q);
  useEffect(() => {
    const timer = setTimeout(() => {
      // The address keeps the search, so that a reload and a link find the same.
      if (typed.trim() !== q) router.setParams({ q: typed.trim() || undefined });
    }, SEARCH_DELAY_MS);
    return () => clearTimeout(timer);
  }, [typed, q, router]);
  const { data, previousData, loading, error, refetch } = useQuery(ErrorReportsDocument, {
    variables: { text: q === "" ? null : q },
    fetchPolicy: "cache-and-network",
  });
  const reports = (data ?? previousData)?.errorReports;
  const open = reports?.filter(({ state }) => state === "open") ?? [];
  const settled = reports?.filter(({ state }) => state !== "open") ?? [];
  return (
    <>
      <Field
        name="search"
        label="Search by number, paper or words"
        value={typed}
        onChangeText={setTyped}
        inputMode="search"
        autoComplete="off"
        maxLength={200}
      />
      {loading && !reports ? <Loading label="Fetching the reports" /> : null}
      {error && !reports ? <Failed error={error} onRetry={() => void refetch()} /> : null}
      {reports && reports.length === 0 ? (
        q === "" ? (
          <Empty
            icon="check-all"
            title="No error is reported"
            text="Any reader can report one on a record's page. A mail tells you when one comes."
            action={<Button kind="tonal" label="To the desk" href="/desk" />}
          />
        ) : (
          <Empty
            icon="magnify"
            title="No report has these words"
            text="Search for a part of them, or for a record's number."
            action={<Button kind="tonal" label="Clear the search" onPress={() => setTyped("")} />}
          />
        )
      ) : null}
      <Group title="Waiting, oldest first" rows={open} />
      <Group title="Answered" rows={settled} />
    </>
  );
}

function Group({ title, rows }: { title: string; rows: readonly ErrorReportItemFragment[] }) {
  if (rows.length === 0) return null;
  return (
    <View style={{ gap: 8 }}>
      <Block level={2}>{`${title}, ${rows.length}`}</Block>
      <Card flush>
        <View role="list" aria-label={title}>
          {rows.map((row, index) => (
            <ListRow key={row.id} href={`/desk/reports/${row.id}`} first={index === 0}>
              <View
                style={{ flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: 8 }}
              >
                <Mono style={{ fontSize: 14 }}>{row.quotable}</Mono>
                <StatusPill state={row.state} />
                {row.state === "open" ? (
                  <Dense muted>{`waits ${waitingTime(row.reportedAt)}`}</Dense>
                ) : row.outcome ? (
                  <Dense muted>{standing(row)}</Dense>
                ) : null}
              </View>
              <Dense numberOfLines={2}>{row.text}</Dense>
              <Caption>
                {[row.citation?.shortName, dateTime(row.reportedAt)].filter(Boolean).join(", ")}
              </Caption>
            </ListRow>
          ))}
        </View>
      </Card>
    </View>
  );
}
