import { useQuery } from "@apollo/client/react";
import { View } from "react-native";

import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { ListRow } from "@/components/ListRow";
import { NotationText } from "@/components/NotationText";
import { plainFields } from "@/components/statement/plainFields";
import { StatusPill } from "@/components/StatusPill";
import { Block, Caption, Dense, Mono, Section } from "@/components/Text";
import { dateTime } from "@/components/when";
import { useColors } from "@/theme/ThemeProvider";
import { MyDeskDocument, type MyDeskQuery } from "~graphql/generated/graphql";
import type { FieldName } from "~shared/statement/fields";
import { notationAsPrinted } from "~shared/statement/notation";
import { FIELD_NAMES, tagName } from "~shared/statement/words";

type Mine = MyDeskQuery["mySubmissions"][number];

/** A contributor's work: what came back stands first. */
export function MySubmissions() {
  const { data, loading, error, refetch } = useQuery(MyDeskDocument, {
    fetchPolicy: "cache-and-network",
  });
  const all = data?.mySubmissions ?? [];
  // A returned revision that was answered is represented by its answer, whatever became of that.
  const returned = newestOf(all).filter(({ state }) => state === "returned");
  const drafts = all.filter(({ state }) => state === "draft");
  const under = all.filter(({ state }) => state === "submitted" || state === "inReview");
  const approved = newestOf(all.filter(({ state }) => state === "approved"));

  return (
    <View style={{ gap: 16 }}>
      <View
        style={{
          flexDirection: "row",
          flexWrap: "wrap",
          alignItems: "center",
          justifyContent: "space-between",
          gap: 12,
        }}
      >
        <Section>My constraints</Section>
        <View style={{ flexDirection: "row", flexWrap: "wrap", gap: 8 }}>
          <Button
            kind="outline"
            icon="file-upload-outline"
            label="Import a file"
            href="/desk/import"
          />
          <Button kind="filled" icon="plus" label="New constraint" href="/desk/submit/new" />
        </View>
      </View>
      {loading && !data ? <Loading label="Fetching your constraints" /> : null}
      {error && !data ? <Failed error={error} onRetry={() => void refetch()} /> : null}
      {data && all.length === 0 ? (
        <Card>
          <Empty
            icon="pencil-outline"
            title="Nothing yet"
            text="Start with a paper's BibTeX, or bring a whole list of your group as CSV and .bib."
            action={<Button kind="tonal" label="New constraint" href="/desk/submit/new" />}
          />
        </Card>
      ) : null}
      <Group title="Returned to you" rows={returned} />
      <Group title="Drafts" rows={drafts} />
      <Group title="With the editors" rows={under} />
      <Group title="Approved" rows={approved} />
    </View>
  );
}

/** The last revision of each record, in the order given. */
function newestOf(rows: readonly Mine[]): Mine[] {
  const last = new Map<string, number>();
  for (const { number, ordinal } of rows)
    last.set(number, Math.max(ordinal, last.get(number) ?? 0));
  return rows.filter(({ number, ordinal }) => last.get(number) === ordinal);
}

function Group({ title, rows }: { title: string; rows: readonly Mine[] }) {
  if (rows.length === 0) return null;
  return (
    <View style={{ gap: 8 }}>
      <Block>{`${title}, ${rows.length}`}</Block>
      <Card flush>
        <View role="list" aria-label={title}>
          {rows.map((row, index) => (
            <Row key={row.id} row={row} first={index === 0} />
          ))}
        </View>
      </Card>
    </View>
  );
}

function Row({ row, first }: { row: Mine; first: boolean }) {
  const colors = useColors();
  const fields = plainFields(row.fields);
  const open = row.comments.filter(({ answer }) => !answer);
  const asked = row.state === "returned" || (row.state === "draft" && open.length > 0);
  const paper = row.citation?.shortName ?? "No paper chosen yet";
  return (
    <ListRow href={`/desk/submit/${row.id}`} first={first}>
      <View style={{ flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: 8 }}>
        <Mono style={{ fontSize: 14 }}>
          {row.ordinal > 1 ? `${row.number}.${row.ordinal}` : row.number}
        </Mono>
        <StatusPill state={row.state} />
      </View>
      <Dense style={{ fontWeight: "600" }}>{paper}</Dense>
      <View style={{ flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: 8 }}>
        {fields.quantity && fields.kind ? (
          <NotationText notation={notationAsPrinted(fields)} size="row" symbol />
        ) : (
          <Dense muted>Nothing printed entered yet</Dense>
        )}
        {fields.z ? <Dense muted>{`z = ${fields.z}`}</Dense> : null}
        {fields.methodTags[0] ? <Dense muted>{tagName(fields.methodTags[0])}</Dense> : null}
      </View>
      {asked
        ? open.slice(0, 3).map((comment) => (
            <Dense key={comment.id} style={{ color: colors.emberText }} numberOfLines={2}>
              {`${FIELD_NAMES[comment.field as FieldName] ?? "The paper"}: ${comment.text}`}
            </Dense>
          ))
        : null}
      {asked && open.length > 3 ? <Caption>{`and ${open.length - 3} more`}</Caption> : null}
      <Caption>
        {row.state === "draft"
          ? `Saved ${dateTime(row.updatedAt)}`
          : row.submittedAt
            ? `Submitted ${dateTime(row.submittedAt)}`
            : ""}
      </Caption>
    </ListRow>
  );
}
