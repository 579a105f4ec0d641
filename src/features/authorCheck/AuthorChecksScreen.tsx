import { useQuery } from "@apollo/client/react";
import { View } from "react-native";

import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { DeskPage } from "@/components/DeskPage";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Field } from "@/components/Field";
import { ListRow } from "@/components/ListRow";
import { Block, Caption, Dense, Mono } from "@/components/Text";
import { longDay } from "@/components/when";
import { useSearch } from "@/components/useSearch";
import { type AuthorCheckItemFragment, AuthorChecksDocument } from "~graphql/generated/graphql";

import { standingWords } from "./parts";

/** Authors who were asked about records of their papers: comments that wait stand first. */
export function AuthorChecksScreen() {
  return (
    <DeskPage
      title="Author checks"
      subtitle="What authors say of records of their papers"
      here="/desk/author-checks"
      role="editor"
    >
      <Checks />
    </DeskPage>
  );
}

const waits = ({ state, verdict }: AuthorCheckItemFragment) =>
  state === "answered" && verdict === "comments";

function Checks() {
  const search = useSearch(["all"], "all");
  const { data, previousData, loading, error, refetch } = useQuery(AuthorChecksDocument, {
    variables: { text: search.q === "" ? null : search.q },
    fetchPolicy: "cache-and-network",
  });
  const checks = (data ?? previousData)?.authorChecks;
  const open = checks?.filter((check) => check.state === "sent" && !check.expired) ?? [];
  const settled = checks?.filter((check) => !waits(check) && !open.includes(check)) ?? [];
  return (
    <>
      <Field
        name="search"
        label="Search by number, paper or author"
        value={search.typed}
        onChangeText={search.setTyped}
        inputMode="search"
        autoComplete="off"
        maxLength={200}
      />
      {loading && !checks ? <Loading label="Fetching the checks" /> : null}
      {error && !checks ? <Failed error={error} onRetry={() => void refetch()} /> : null}
      {checks && checks.length === 0 ? (
        search.q === "" ? (
          <Empty
            icon="email-outline"
            title="No author was asked yet"
            text="On a record's page, or beside a second reading, an editor can ask an author of the paper."
            action={<Button kind="tonal" label="See the constraints" href="/constraints" />}
          />
        ) : (
          <Empty
            icon="magnify"
            title="No check has these words"
            text="Search for a part of them, or for a record's number."
            action={<Button kind="tonal" label="Clear the search" onPress={search.clear} />}
          />
        )
      ) : null}
      <Group title="Comments, oldest first" rows={checks?.filter(waits) ?? []} />
      <Group title="Not answered yet" rows={open} />
      <Group title="Answered and ended" rows={settled} />
    </>
  );
}

function Group({ title, rows }: { title: string; rows: readonly AuthorCheckItemFragment[] }) {
  if (rows.length === 0) return null;
  return (
    <View style={{ gap: 8 }}>
      <Block level={2}>{`${title}, ${rows.length}`}</Block>
      <Card flush>
        <View role="list" aria-label={title}>
          {rows.map((check, index) => (
            <ListRow key={check.id} href={`/desk/author-checks/${check.id}`} first={index === 0}>
              <View
                style={{ flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: 8 }}
              >
                <Mono style={{ fontSize: 14 }}>{check.quotable}</Mono>
                <Dense muted>{standingWords(check)}</Dense>
              </View>
              <Dense style={{ fontWeight: "600" }}>{check.citation?.shortName ?? ""}</Dense>
              <Caption>
                {`${check.authorName ?? "An author"}, asked by ${check.sentBy} on ${longDay(check.sentAt)}`}
              </Caption>
            </ListRow>
          ))}
        </View>
      </Card>
    </View>
  );
}
