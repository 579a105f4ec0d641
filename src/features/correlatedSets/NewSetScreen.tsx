import { useMutation, useQuery } from "@apollo/client/react";
import { useLocalSearchParams, useRouter } from "expo-router";
import { useState } from "react";
import { View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { CheckRow } from "@/components/CheckRow";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Notice } from "@/components/Notice";
import { plainFields } from "@/components/statement/plainFields";
import { Body, Dense, Section } from "@/components/Text";
import { Screen } from "@/layout/Screen";
import { SetCandidatesDocument, StartSetDocument } from "~graphql/generated/graphql";
import { lineText, notationAsPrinted, recordTitle } from "~shared/statement/notation";

import { RolePage } from "./Gate";

/** Which records of a paper its printed matrix is about. */
export function NewSetScreen() {
  const { paper = "", with: wanted } = useLocalSearchParams<{ paper?: string; with?: string }>();
  const here = `/desk/sets/new?paper=${paper}${wanted ? `&with=${wanted}` : ""}`;
  return (
    <RolePage
      title="New correlated set"
      role="contributor"
      here={here}
      because="Contributors submit correlated sets"
    >
      {() => <Choose paper={paper} wanted={wanted ?? null} />}
    </RolePage>
  );
}

function Choose({ paper, wanted }: { paper: string; wanted: string | null }) {
  const router = useRouter();
  const { data, loading, error, refetch } = useQuery(SetCandidatesDocument, {
    variables: { citationId: paper },
    skip: paper === "",
    fetchPolicy: "cache-and-network",
  });
  const [start, { loading: starting }] = useMutation(StartSetDocument);
  const [chosen, setChosen] = useState<readonly string[]>(wanted ? [wanted] : []);
  const [problem, setProblem] = useState<string | null>(null);
  const candidates = data?.setCandidates ?? [];
  const free = candidates.filter(({ cannotJoin }) => !cannotJoin);
  const barred = candidates.filter(({ cannotJoin }) => cannotJoin);
  const members = free.map(({ number }) => number).filter((number) => chosen.includes(number));

  async function begin() {
    setProblem(null);
    try {
      const outcome = (await start({ variables: { input: { citationId: paper, members } } })).data
        ?.startSet;
      if (outcome?.__typename === "CorrelatedSet") {
        router.replace(`/desk/sets/${outcome.number}` as never);
      } else setProblem(outcome?.message ?? "The server gave no answer. Try again.");
    } catch (thrown) {
      setProblem(userMessage(thrown));
    }
  }

  return (
    <Screen title="New correlated set" back="/desk">
      <View style={{ gap: 16, maxWidth: 720 }}>
        <Body>
          Some papers print a covariance or correlation matrix for several of their results. Choose
          the records it is about, in the next step you type the matrix.
        </Body>
        {paper === "" ? (
          <Empty
            title="Which paper?"
            text="Open a record of the paper, and start the set from there."
            action={<Button kind="tonal" label="All constraints" href="/constraints" />}
          />
        ) : error && !data ? (
          <Failed error={error} onRetry={() => void refetch()} />
        ) : loading && !data ? (
          <Loading label="Fetching the paper's records" />
        ) : free.length < 2 ? (
          <Empty
            title="Not enough records of this paper"
            text="A set has at least two two-sided values. Submit them first; approved records and submissions of your own count."
            action={<Button kind="tonal" label="To the desk" href="/desk" />}
          />
        ) : (
          <>
            <Section>Records of the matrix</Section>
            <Card>
              {free.map(({ number, approved, fields }) => (
                <CheckRow
                  key={number}
                  label={`${number}, ${fields ? recordTitle(plainFields(fields)) : ""}`}
                  hint={[
                    fields ? lineText(notationAsPrinted(plainFields(fields))) : "",
                    approved ? "" : "your submission, not approved yet",
                  ]
                    .filter(Boolean)
                    .join("; ")}
                  checked={chosen.includes(number)}
                  onChange={(on) =>
                    setChosen((before) =>
                      on ? [...before, number] : before.filter((one) => one !== number),
                    )
                  }
                />
              ))}
            </Card>
            {problem ? <Notice grade="error">{problem}</Notice> : null}
            <Button
              kind="filled"
              label={
                members.length < 2 ? "Type the matrix" : `Type the matrix of ${members.length}`
              }
              busy={starting}
              disabledBecause={members.length < 2 ? "Choose at least two records." : undefined}
              onPress={() => void begin()}
            />
          </>
        )}
        {barred.length > 0 ? (
          <View style={{ gap: 4 }}>
            <Section>Can’t stand in a matrix</Section>
            {barred.map(({ number, cannotJoin }) => (
              <Dense key={number} muted>{`${number} ${cannotJoin}.`}</Dense>
            ))}
          </View>
        ) : null}
      </View>
    </Screen>
  );
}
