import { useQuery } from "@apollo/client/react";
import { useLocalSearchParams } from "expo-router";
import { View } from "react-native";

import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { DefinitionList } from "@/components/DefinitionList";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { ListRow } from "@/components/ListRow";
import { NotationText } from "@/components/NotationText";
import { RecordTitle } from "@/components/RecordTitle";
import { plainFields } from "@/components/statement/plainFields";
import { Caption, Dense, Mono, Section } from "@/components/Text";
import { monthYear } from "@/components/when";
import { Screen } from "@/layout/Screen";
import {
  type CreditedRowFragment,
  PersonCreditDocument,
  type PersonCreditQuery,
} from "~graphql/generated/graphql";
import { notationAsPrinted } from "~shared/statement/notation";

type Person = NonNullable<PersonCreditQuery["personCredit"]>;

/** A contributor's or an editor's page: what they entered, what they read again. */
export function PersonScreen() {
  const { id } = useLocalSearchParams<{ id: string }>();
  const { data, loading, error, refetch } = useQuery(PersonCreditDocument, { variables: { id } });
  const person = data?.personCredit;
  return (
    <Screen
      title={person?.nameOnPapers ?? "A person"}
      subtitle={person ? doneWords(person) : undefined}
      back="/constraints"
    >
      <View style={{ gap: 32, maxWidth: 860, width: "100%" }}>
        {loading && !data ? <Loading label="Fetching what this person brought" /> : null}
        {error && !data ? <Failed error={error} onRetry={() => void refetch()} /> : null}
        {data && !person ? (
          <Empty
            icon="account-circle-outline"
            title="No such page"
            text="Only who has entered or read an approved constraint has one, and former members may have chosen to have none."
            action={<Button kind="filled" label="See the constraints" href="/constraints" />}
          />
        ) : null}
        {person ? <Credited person={person} /> : null}
      </View>
    </Screen>
  );
}

function doneWords({ enteredTotal, readTotal }: Person): string {
  if (readTotal === 0) return "Contributor";
  return enteredTotal === 0 ? "Editor" : "Contributor and editor";
}

function Credited({ person }: { person: Person }) {
  const { orcid } = person;
  return (
    <>
      <DefinitionList
        items={[
          {
            term: "ORCID",
            value: orcid ? (
              <Button
                kind="text"
                icon="open-in-new"
                label={orcid}
                href={`https://orcid.org/${orcid}`}
              />
            ) : (
              <Dense muted>not given</Dense>
            ),
          },
          { term: "Since", value: monthYear(person.since) },
          ...(person.enteredTotal > 0
            ? [{ term: "Entered", value: constraints(person.enteredTotal) }]
            : []),
          ...(person.readTotal > 0
            ? [{ term: "Second readings", value: constraints(person.readTotal) }]
            : []),
          ...(person.former ? [{ term: "Account", value: "Has left the registry" }] : []),
        ]}
      />
      <Rows title="Entered" rows={person.entered} total={person.enteredTotal} />
      <Rows title="Read again" rows={person.read} total={person.readTotal} />
    </>
  );
}

function constraints(count: number): string {
  return count === 1 ? "1 constraint" : `${count} constraints`;
}

function Rows({
  title,
  rows,
  total,
}: {
  title: string;
  rows: readonly CreditedRowFragment[];
  total: number;
}) {
  if (rows.length === 0) return null;
  return (
    <View style={{ gap: 12 }}>
      <Section>{title}</Section>
      <Card flush>
        <View role="list" aria-label={title}>
          {rows.map((row, index) => (
            <Row key={row.number} row={row} first={index === 0} />
          ))}
        </View>
      </Card>
      {rows.length < total ? (
        <Caption>{`The newest ${rows.length} of ${total} are listed.`}</Caption>
      ) : null}
    </View>
  );
}

function Row({ row, first }: { row: CreditedRowFragment; first: boolean }) {
  const fields = plainFields(row.fields);
  return (
    <ListRow href={`/constraints/${row.number}`} first={first}>
      <View style={{ flexDirection: "row", flexWrap: "wrap", alignItems: "center", columnGap: 12 }}>
        <Mono style={{ fontSize: 14 }}>{row.number}</Mono>
        <Dense muted>{row.citation.shortName}</Dense>
      </View>
      <Dense style={{ fontWeight: "600" }}>
        <RecordTitle fields={fields} />
      </Dense>
      {fields.kind === "qualitative" ? null : (
        <NotationText notation={notationAsPrinted(fields)} size="row" symbol />
      )}
    </ListRow>
  );
}
