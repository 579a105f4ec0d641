import { useMutation } from "@apollo/client/react";
import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { Choice } from "@/components/Choice";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Sheet } from "@/components/Sheet";
import { TagField } from "@/components/TagField";
import { Caption, Mono } from "@/components/Text";
import { space } from "@/theme/tokens";
import { EditNamedDataDocument, type NamedDataPartsFragment } from "~graphql/generated/graphql";
import { comparableDataName } from "~shared/dependence/dataName";
import {
  coordinateProblem,
  DATA_KINDS,
  DATA_KIND_WORDS,
  DATA_LENGTHS,
  sexagesimal,
  type DataKind,
} from "~shared/dependence/namedData";

const FIELDS = ["name", "aliases", "ra", "dec", "extent", "note"];

/** What an editor says of an entry. What was typed stays when the sheet is closed. */
export function DataEditSheet({
  visible,
  entry,
  onClose,
  onDone,
}: {
  visible: boolean;
  entry: NamedDataPartsFragment;
  onClose: () => void;
  onDone: () => void;
}) {
  const [name, setName] = useState(entry.name);
  const [kind, setKind] = useState<DataKind>(entry.kind);
  const [ra, setRa] = useState(entry.ra ?? "");
  const [dec, setDec] = useState(entry.dec ?? "");
  const [extent, setExtent] = useState(entry.extent ?? "");
  const [note, setNote] = useState(entry.note ?? "");
  const [aliases, setAliases] = useState<string[]>([...entry.aliases]);
  const [refusal, setRefusal] = useState<{ message: string; field: string | null } | null>(null);
  const [edit, { loading }] = useMutation(EditNamedDataDocument);
  const dropped = entry.aliases.filter((alias) => !aliases.includes(alias));
  const at = (field: string) => (refusal?.field === field ? refusal.message : undefined);
  const place = coordinateProblem(ra.trim() || null, dec.trim() || null);
  const readable = ra.trim() !== "" && place === null;

  async function save() {
    setRefusal(null);
    try {
      const { data } = await edit({
        variables: {
          input: {
            slug: entry.slug,
            version: entry.version,
            name,
            kind,
            ra,
            dec,
            extent,
            note,
            aliases,
          },
        },
      });
      const result = data?.editNamedData;
      if (result?.__typename === "NamedData") onDone();
      else {
        setRefusal({
          message: result?.message ?? "The server gave no answer. Try again.",
          field: result?.field ?? null,
        });
      }
    } catch (error) {
      setRefusal({ message: userMessage(error), field: null });
    }
  }

  return (
    <Sheet
      visible={visible}
      title={`Edit ${entry.name}`}
      onClose={onClose}
      footer={<Button label="Save" kind="filled" busy={loading} onPress={() => void save()} />}
    >
      <Field
        label="Name"
        name="name"
        value={name}
        onChangeText={setName}
        maxLength={DATA_LENGTHS.name}
        error={at("name")}
        hint="The former name stays only if it stands among the other names."
      />
      <Choice
        label="Kind"
        value={kind}
        options={DATA_KINDS.map((value) => ({ value, label: DATA_KIND_WORDS[value] }))}
        onChange={(value) => setKind((value ?? "unknown") as DataKind)}
      />
      <TagField
        label="Other names"
        values={aliases}
        onChange={setAliases}
        comparable={comparableDataName}
        error={at("aliases")}
        hint="Spellings that differ only in case, blanks and dashes are one anyway."
      />
      {dropped.length > 0 ? (
        <Notice grade="note">
          {`Taken out: ${dropped.join(", ")}. What constraints use becomes an entry of its own again.`}
        </Notice>
      ) : null}
      <View style={styles.pair}>
        <View style={styles.half}>
          <Field
            label="Right ascension, degrees"
            name="ra"
            value={ra}
            onChangeText={setRa}
            numeric
            inputMode="text"
            maxLength={20}
            error={at("ra") ?? (place?.field === "ra" && ra !== "" ? place.message : undefined)}
          />
        </View>
        <View style={styles.half}>
          <Field
            label="Declination, degrees"
            name="dec"
            value={dec}
            onChangeText={setDec}
            numeric
            inputMode="text"
            maxLength={20}
            error={at("dec") ?? (place?.field === "dec" && dec !== "" ? place.message : undefined)}
          />
        </View>
      </View>
      {readable ? (
        <View>
          <Caption muted>J2000, the same in hours and degrees</Caption>
          <Mono style={styles.place}>
            {sexagesimal(Number(ra), Number(dec.replace("\u2212", "-")))}
          </Mono>
        </View>
      ) : null}
      <Field
        label="Area or extent, in words"
        name="extent"
        value={extent}
        onChangeText={setExtent}
        maxLength={DATA_LENGTHS.extent}
        error={at("extent")}
      />
      <Field
        label="Note"
        name="note"
        value={note}
        onChangeText={setNote}
        multiline
        maxLength={DATA_LENGTHS.note}
        error={at("note")}
      />
      {refusal && !FIELDS.includes(refusal.field ?? "") ? (
        <Notice grade="error">{refusal.message}</Notice>
      ) : null}
    </Sheet>
  );
}

const styles = StyleSheet.create({
  pair: { flexDirection: "row", gap: space.s, alignItems: "flex-start" },
  half: { flex: 1, minWidth: 0 },
  place: { fontSize: 14 },
});
