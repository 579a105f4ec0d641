import { View } from "react-native";

import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { ListRow } from "@/components/ListRow";
import { NotationText } from "@/components/NotationText";
import { plainFields } from "@/components/statement/plainFields";
import { StatusPill } from "@/components/StatusPill";
import { Block, Caption, Dense, Mono } from "@/components/Text";
import { dateTime } from "@/components/when";
import { useColors } from "@/theme/ThemeProvider";
import type { MyDeskQuery } from "~graphql/generated/graphql";
import type { FieldName } from "~shared/statement/fields";
import { notationAsPrinted } from "~shared/statement/notation";
import { FIELD_NAMES, tagName } from "~shared/statement/words";

export type Mine = MyDeskQuery["mySubmissions"][number];

/** The last revision of each record, in the order given. */
export function newestOf(rows: readonly Mine[]): Mine[] {
  const last = new Map<string, number>();
  for (const { number, ordinal } of rows)
    last.set(number, Math.max(ordinal, last.get(number) ?? 0));
  return rows.filter(({ number, ordinal }) => last.get(number) === ordinal);
}

/** Submissions under a heading that counts them; on the desk, only the latest of many. */
export function MyGroup({
  title,
  rows: all,
  most = all.length,
  more,
  level,
}: {
  title: string;
  rows: readonly Mine[];
  most?: number;
  /** Where the others are. */
  more?: string;
  level?: 2;
}) {
  if (all.length === 0) return null;
  const rows = all.slice(0, most);
  return (
    <View style={{ gap: 8 }}>
      <Block level={level}>
        {`${title}, ${rows.length < all.length ? `${rows.length} of ${all.length}` : all.length}`}
      </Block>
      <Card flush>
        <View role="list" aria-label={title}>
          {rows.map((row, index) => (
            <Row key={row.id} row={row} first={index === 0} />
          ))}
        </View>
      </Card>
      {more && rows.length < all.length ? (
        <View style={{ flexDirection: "row", marginLeft: -12 }}>
          <Button
            kind="text"
            label={`All ${all.length}`}
            accessibilityLabel={`${title}: all ${all.length}`}
            href={more}
          />
        </View>
      ) : null}
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
