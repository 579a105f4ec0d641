import { useMutation, useQuery } from "@apollo/client/react";
import Head from "expo-router/head";
import { useLocalSearchParams } from "expo-router";
import { useState } from "react";
import { View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { RadioRows } from "@/components/CheckRow";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Body, Dense, Section } from "@/components/Text";
import { longDay } from "@/components/when";
import { Screen } from "@/layout/Screen";
import {
  AnswerAuthorCheckDocument,
  AuthorCheckByLinkDocument,
  type AuthorCheckPagePartsFragment,
} from "~graphql/generated/graphql";
import { CHECK_ADDRESS_KEPT_DAYS, CHECK_TEXT, type CheckVerdict } from "~shared/review/authorCheck";

import { CheckedRecord } from "./CheckedRecord";
import { Lines } from "./parts";

type Page = AuthorCheckPagePartsFragment;

/** What a paper's author sees behind the mailed link: the record, and room for one answer. */
export function CheckLinkScreen() {
  const { token } = useLocalSearchParams<{ token: string }>();
  const { data, loading, error, refetch } = useQuery(AuthorCheckByLinkDocument, {
    variables: { token },
    fetchPolicy: "network-only",
  });
  const [answered, setAnswered] = useState<Page | null>(null);
  const page = answered ?? data?.authorCheckByLink ?? null;
  return (
    <Screen title="Check of a record" subtitle={page?.quotable} back="/">
      <Head>
        <meta name="robots" content="noindex, nofollow" />
      </Head>
      <View style={{ gap: 24, maxWidth: 760, width: "100%" }}>
        {loading && !data ? <Loading label="Fetching the record" /> : null}
        {error && !data ? <Failed error={error} onRetry={() => void refetch()} /> : null}
        {data && !page ? (
          <Empty
            icon="link-variant"
            title="This link opens nothing"
            text="Open the whole link from the mail; it ends with a long token."
            action={<Button kind="filled" label="See the constraints" href="/constraints" />}
          />
        ) : null}
        {page ? (
          <Opened
            page={page}
            token={token}
            fresh={answered !== null}
            onAnswered={setAnswered}
            onReload={() => {
              setAnswered(null);
              void refetch();
            }}
          />
        ) : null}
      </View>
    </Screen>
  );
}

function Opened({
  page,
  token,
  fresh,
  onAnswered,
  onReload,
}: {
  page: Page;
  token: string;
  /** Whether it was answered just now. */
  fresh: boolean;
  onAnswered: (page: Page) => void;
  onReload: () => void;
}) {
  const toRecord = page.approved ? (
    <Button kind="tonal" label={`See ${page.number}`} href={`/constraints/${page.number}`} />
  ) : (
    <Button kind="tonal" label="See the constraints" href="/constraints" />
  );
  switch (page.standing) {
    case "expired":
      return (
        <Empty
          icon="clock-outline"
          title="This link has run out"
          text={`It worked until ${longDay(page.expiresAt)}. ${page.askedBy} can send you another one.`}
          action={toRecord}
        />
      );
    case "revoked":
      return (
        <Empty
          icon="undo"
          title="This link was taken back"
          text={`${page.askedBy} asked you and then took the link back. Nothing is expected of you.`}
          action={toRecord}
        />
      );
    case "hidden":
      return (
        <Empty
          icon="eye-off-outline"
          title="You have yet to read this record"
          text="You are signed in as an editor who has not stored a reading of it. The author's link shows nothing to you until then."
          action={<Button kind="filled" label="To the desk" href="/desk" />}
        />
      );
    case "closed":
      return (
        <>
          <Notice grade="done" title="You have answered, and it is closed" action={toRecord}>
            Thank you. The answer stands with the record; nothing here is open any more.
          </Notice>
          <Lines lines={page.lines} author="You" />
        </>
      );
    case "open":
    case "answered":
      return (
        <>
          {page.standing === "answered" ? (
            <Notice
              grade="done"
              title={fresh ? "Thank you, your answer is kept" : "You have answered"}
            >
              Until the editors close it, or the link runs out, you can send another answer; the
              last one counts.
            </Notice>
          ) : (
            <Body>
              {`${page.askedBy}, an editor of this registry, asks you: does this record say what your paper says? No account is needed.`}
            </Body>
          )}
          {page.outdated ? (
            <Notice grade="caution">
              A newer revision of this record has come into use since you were asked.
            </Notice>
          ) : null}
          {page.fields ? <CheckedRecord page={page} /> : null}
          <Lines lines={page.lines} author="You" />
          <Answer
            key={page.version}
            page={page}
            token={token}
            onAnswered={onAnswered}
            onReload={onReload}
          />
          <KeptData page={page} />
        </>
      );
  }
}

function Answer({
  page,
  token,
  onAnswered,
  onReload,
}: {
  page: Page;
  token: string;
  onAnswered: (page: Page) => void;
  onReload: () => void;
}) {
  const [verdict, setVerdict] = useState<CheckVerdict | null>(null);
  const [text, setText] = useState("");
  const [problem, setProblem] = useState<{ message: string; stale: boolean } | null>(null);
  const [answer, { loading }] = useMutation(AnswerAuthorCheckDocument);
  const send = async () => {
    if (verdict === null) return;
    setProblem(null);
    try {
      const { data } = await answer({
        variables: { token, version: page.version, verdict, text: text.trim() || null },
      });
      const outcome = data?.answerAuthorCheck;
      if (outcome?.__typename === "AuthorCheckPage") onAnswered(outcome);
      else {
        setProblem({
          message: outcome?.message ?? "The server gave no answer. Try again.",
          stale: outcome?.code === "STALE" || outcome?.code === "CLOSED",
        });
      }
    } catch (error) {
      setProblem({ message: userMessage(error), stale: false });
    }
  };
  const missing =
    verdict === null
      ? "Choose one of the two first."
      : verdict === "comments" && text.trim().length < CHECK_TEXT.shortest
        ? "Write your comments first."
        : undefined;
  return (
    <View style={{ gap: 12 }}>
      <Section>{page.standing === "answered" ? "Correct your answer" : "Your answer"}</Section>
      <RadioRows
        label="Your answer"
        value={verdict}
        options={[
          { value: "correct", label: "It says what the paper says" },
          { value: "comments", label: "I have comments" },
        ]}
        onChange={(chosen) => setVerdict(chosen as CheckVerdict)}
      />
      {verdict === null ? null : (
        <Field
          name="comments"
          label={verdict === "comments" ? "Your comments" : "A remark, or leave it empty"}
          multiline
          value={text}
          onChangeText={setText}
          maxLength={CHECK_TEXT.longest}
          hint="The editors read it; the record's page shows only that you commented."
        />
      )}
      {problem ? (
        <Notice
          grade="error"
          action={
            problem.stale ? (
              <Button
                kind="tonal"
                icon="refresh"
                label="See how it stands now"
                onPress={onReload}
              />
            ) : undefined
          }
        >
          {problem.message}
        </Notice>
      ) : null}
      <Button
        kind="filled"
        icon="send-outline"
        label="Send the answer"
        busy={loading}
        disabledBecause={missing}
        onPress={() => void send()}
      />
    </View>
  );
}

/** What is kept of the person, and for how long. */
function KeptData({ page }: { page: Page }) {
  return (
    <View style={{ gap: 8 }}>
      <Section>What is kept of you</Section>
      <Dense>
        {page.authorName || page.authorEmail
          ? `Your name (${page.authorName ?? "forgotten"}) and address (${page.authorEmail ?? "forgotten"}), as ${page.askedBy} typed them. Editors see them; the public does not.`
          : "Nothing but the answer."}
      </Dense>
      <Dense muted>
        {`Both are forgotten ${CHECK_ADDRESS_KEPT_DAYS} days after the check has ended. Your answer stays with the record; its page says that an author of the paper checked it, and when, without your name. This page sets no cookie.`}
      </Dense>
    </View>
  );
}
