import { useQuery } from "@apollo/client/react";

import { Button } from "@/components/Button";
import { Choice } from "@/components/Choice";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Field } from "@/components/Field";
import { MyDeskDocument } from "~graphql/generated/graphql";
import { tagName } from "~shared/statement/words";

import { DeskPage } from "@/components/DeskPage";
import { type Mine, MyGroup, newestOf } from "./MyRows";
import { hasWords } from "./queueFilter";
import { useSearch } from "@/components/useSearch";

const PARTS = ["all", "returned", "draft", "waiting", "approved"] as const;
type Part = (typeof PARTS)[number];

const WORDS: Record<Part, string> = {
  all: "All",
  returned: "Returned to you",
  draft: "Drafts",
  waiting: "With the editors",
  approved: "Approved",
};

function partOf({ state }: Mine): Part {
  return state === "submitted" || state === "inReview" ? "waiting" : (state as Part);
}

/** Everything this person has brought, searched and narrowed. */
export function MineScreen() {
  return (
    <DeskPage title="My constraints" here="/desk/mine" role={null}>
      <Whole />
    </DeskPage>
  );
}

function Whole() {
  const search = useSearch(PARTS, "all");
  const { data, loading, error, refetch } = useQuery(MyDeskDocument, {
    fetchPolicy: "cache-and-network",
  });
  if (loading && !data) return <Loading label="Fetching your constraints" />;
  if (error && !data) return <Failed error={error} onRetry={() => void refetch()} />;
  // Of each record the newest revision: what came before stands in its trail.
  const mine = newestOf(data?.mySubmissions ?? []);
  const found = mine.filter(({ citation, number, fields }) =>
    hasWords(
      [
        number,
        citation?.shortName,
        citation?.title,
        fields.place,
        fields.printedText,
        ...fields.dataUsed,
        ...fields.methodTags.map(tagName),
      ],
      search.typed,
    ),
  );
  const shown = found.filter((row) => search.part === "all" || partOf(row) === search.part);
  if (mine.length === 0) {
    return (
      <Empty
        icon="pencil-outline"
        title="Nothing yet"
        text="What you submit stands here, with everything that was asked and answered."
        action={<Button kind="filled" label="To the desk" href="/desk" />}
      />
    );
  }
  return (
    <>
      <Field
        name="search"
        label="Search by paper, number, place, method or data"
        value={search.typed}
        onChangeText={search.setTyped}
        inputMode="search"
        autoComplete="off"
        maxLength={200}
      />
      <Choice
        label="Show"
        value={search.part}
        options={PARTS.map((part) => ({
          value: part,
          label: `${WORDS[part]}, ${found.filter((row) => part === "all" || partOf(row) === part).length}`,
        }))}
        onChange={(part) => search.setPart((part ?? "all") as Part)}
      />
      {shown.length === 0 ? (
        <Empty
          icon="magnify"
          title="None of yours is like this"
          text="Search for a part of a name or a title, or show all."
          action={<Button kind="tonal" label="Show all of mine" onPress={search.clear} />}
        />
      ) : (
        <MyGroup
          title={search.part === "all" ? "My constraints" : WORDS[search.part]}
          rows={shown}
          level={2}
        />
      )}
    </>
  );
}
