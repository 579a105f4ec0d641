import { View } from "react-native";

import { Card } from "@/components/Card";
import { Choice } from "@/components/Choice";
import { Notice } from "@/components/Notice";
import { Block, Caption, Dense, Label, Mono, Section } from "@/components/Text";
import { useLayoutClass } from "@/layout/useLayoutClass";
import {
  choiceWords,
  IMPORT_FIELDS,
  type ImportField,
  importFieldName,
  type WordField,
} from "~shared/formats/importMatching";

import { type Match, type Preview, wordKey } from "./useImport";

const FIELD_OPTIONS = IMPORT_FIELDS.map((field) => ({
  value: field as string,
  label: importFieldName(field),
}));

/** Where each column goes and what each word means; proposals are filled in and can be changed. */
export function MatchStep({
  preview,
  match,
  onColumn,
  onWord,
}: {
  preview: Preview;
  match: Match;
  onColumn: (column: string, field: string | null) => void;
  onWord: (field: string, word: string, value: string | null) => void;
}) {
  const phone = useLayoutClass() === "compact";
  const wordFields = [...new Set(preview.words.map(({ field }) => field))];
  const unmatched = preview.words.filter((word) => valueOf(match, word) === null).length;
  return (
    <View style={{ gap: 24 }}>
      {preview.remembered ? (
        <Notice grade="note">These columns were matched before; that match is filled in.</Notice>
      ) : null}
      <View style={{ gap: 12 }}>
        <Section>Columns</Section>
        <Dense muted>A column that stays without a field is left out.</Dense>
        <View style={phone ? { gap: 12 } : { flexDirection: "row", flexWrap: "wrap", gap: 12 }}>
          {preview.columns.map(({ column, proposedField, sample }) => (
            <View key={column} style={phone ? undefined : { width: 300 }}>
              <Card style={{ gap: 8 }}>
                <Label>{column}</Label>
                <Caption numberOfLines={2}>
                  {sample.length > 0 ? sample.filter(Boolean).slice(0, 3).join(", ") : "empty"}
                </Caption>
                <Choice
                  label={`Field for ${column}`}
                  value={column in match.columns ? match.columns[column]! : (proposedField ?? null)}
                  options={FIELD_OPTIONS}
                  placeholder="Leave it out"
                  onChange={(field) => onColumn(column, field)}
                />
              </Card>
            </View>
          ))}
        </View>
      </View>
      {wordFields.length > 0 ? (
        <View style={{ gap: 12 }}>
          <Section>Words</Section>
          <Dense muted>
            {unmatched === 0
              ? "Every word of the list has a meaning."
              : `${unmatched === 1 ? "One word has" : `${unmatched} words have`} no meaning yet; their fields stay open and the word is kept in the remark.`}
          </Dense>
          {wordFields.map((field) => (
            <View key={field} style={{ gap: 8 }}>
              <Block>{importFieldName(field as ImportField)}</Block>
              {preview.words
                .filter((word) => word.field === field)
                .map((word) => (
                  <View
                    key={word.word}
                    style={{
                      flexDirection: phone ? "column" : "row",
                      alignItems: phone ? "stretch" : "center",
                      gap: phone ? 4 : 16,
                    }}
                  >
                    <View style={phone ? undefined : { width: 260 }}>
                      <Mono style={{ fontSize: 15 }}>{word.word}</Mono>
                    </View>
                    <View
                      style={{ flex: phone ? undefined : 1, maxWidth: phone ? undefined : 420 }}
                    >
                      <Choice
                        label="Meaning"
                        spokenLabel={`Meaning of ${word.word}`}
                        value={valueOf(match, word)}
                        options={optionsOf(word)}
                        placeholder="Leave it open"
                        onChange={(value) => onWord(field, word.word, value)}
                      />
                    </View>
                  </View>
                ))}
            </View>
          ))}
        </View>
      ) : null}
    </View>
  );
}

type Word = Preview["words"][number];

function valueOf(match: Match, { field, word, proposed }: Word): string | null {
  const key = wordKey(field, word);
  return key in match.words ? match.words[key]! : (proposed ?? null);
}

/** The choices of the field, and the proposal where it is more exact than any of them. */
function optionsOf({ field, choices, proposed }: Word): { value: string; label: string }[] {
  const all = proposed && !choices.includes(proposed) ? [proposed, ...choices] : choices;
  return all.map((value) => ({ value, label: choiceWords(field as WordField, value) }));
}
