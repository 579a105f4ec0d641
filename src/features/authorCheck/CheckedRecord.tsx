import { View } from "react-native";

import { Card, Divider } from "@/components/Card";
import { CitationLine } from "@/components/CitationLine";
import { DefinitionList } from "@/components/DefinitionList";
import { NotationText } from "@/components/NotationText";
import { METHOD_FIELDS, PRINTED_FIELDS } from "@/components/statement/printedFields";
import { plainFields } from "@/components/statement/plainFields";
import { Block, Caption, Dense, Section } from "@/components/Text";
import type { AuthorCheckPagePartsFragment } from "~graphql/generated/graphql";
import { asUsed } from "~shared/statement/asUsed";
import type { FieldName } from "~shared/statement/fields";
import { notationAsPrinted, notationAsUsed } from "~shared/statement/notation";
import { FIELD_NAMES, fieldText } from "~shared/statement/words";

/** A revision as it stands: as printed, as used with every conversion in words, and where it comes from. */
export function CheckedRecord({ page }: { page: AuthorCheckPagePartsFragment }) {
  if (!page.fields) return null;
  const fields = plainFields(page.fields);
  const used = asUsed(fields);
  const rows = (names: readonly FieldName[]) =>
    names
      .map((name) => ({ term: FIELD_NAMES[name], value: fieldText(name, fields) }))
      .filter(({ value }) => value !== "");
  return (
    <View style={{ gap: 24 }}>
      {page.citation ? (
        <View style={{ gap: 4 }}>
          <Section>{page.citation.title}</Section>
          <CitationLine citation={page.citation} />
        </View>
      ) : null}
      <Card style={{ gap: 12 }}>
        <Block>As printed</Block>
        <NotationText notation={notationAsPrinted(fields)} size="stated" />
        {fields.printedText ? <Dense muted>{`“${fields.printedText}”`}</Dense> : null}
        <Divider />
        <Block>As used</Block>
        {used === null ? (
          <Dense>Not used by a likelihood: the statement has no number to use.</Dense>
        ) : (
          <>
            <NotationText notation={notationAsUsed(used)} size="stated" />
            {used.steps.length === 0 ? (
              <Dense muted>Taken as it is printed.</Dense>
            ) : (
              used.steps.map(({ code, text }) => (
                <Dense key={code} muted>
                  {text}
                </Dense>
              ))
            )}
          </>
        )}
        <Caption>As printed is what your paper says; as used is what a fit would take.</Caption>
      </Card>
      <View style={{ gap: 12 }}>
        <Section>What the record says</Section>
        <DefinitionList items={rows(PRINTED_FIELDS)} />
      </View>
      <View style={{ gap: 12 }}>
        <Section>Where it comes from</Section>
        <DefinitionList items={rows(METHOD_FIELDS)} />
      </View>
    </View>
  );
}
