import { useMutation } from "@apollo/client/react";
import { useState } from "react";

import { Button } from "@/components/Button";
import { CheckRow } from "@/components/CheckRow";
import { Choice } from "@/components/Choice";
import { Confirm } from "@/components/Confirm";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Sheet } from "@/components/Sheet";
import { TagField } from "@/components/TagField";
import { AddMethodTagDocument, ChangeMethodTagDocument } from "~graphql/generated/graphql";
import { METHOD_LENGTHS, methodProblem, tidyMethod } from "~shared/methods/entry";
import {
  FAMILY_NAMES,
  looseWord,
  METHOD_FAMILIES,
  type MethodFamily,
} from "~shared/methods/vocabulary";

import { constraintWords, type KeptMethod } from "./families";
import { useChange } from "./useChange";

const FIELDS = ["tag", "name", "family", "definition", "caution", "aliases", "position"];

/** The words of a method: a new one, or one that is there, whose tag stays. What was typed stays when it is closed. */
export function MethodSheet({
  visible,
  method,
  methods,
  onClose,
  onDone,
}: {
  visible: boolean;
  method: KeptMethod | null;
  methods: readonly KeptMethod[];
  onClose: () => void;
  onDone: (words: string) => void;
}) {
  const last = Math.max(0, ...methods.map(({ position }) => position));
  const [tag, setTag] = useState(method?.tag ?? "");
  const [name, setName] = useState(method?.name ?? "");
  const [family, setFamily] = useState<MethodFamily | null>(method?.family ?? null);
  const [definition, setDefinition] = useState(method?.definition ?? "");
  const [caution, setCaution] = useState(method?.caution ?? "");
  const [aliases, setAliases] = useState<string[]>([...(method?.aliases ?? [])]);
  const [neverIndependent, setNever] = useState(method?.neverIndependent ?? false);
  const [place, setPlace] = useState(String(method?.position ?? last + 10));
  const [asking, setAsking] = useState(false);
  const [add, adding] = useMutation(AddMethodTagDocument);
  const [change, changing] = useMutation(ChangeMethodTagDocument);
  const { problem, refuse, send } = useChange();
  const at = (field: string) => (problem?.field === field ? problem.message : undefined);

  function words() {
    if (family === null) return null;
    return {
      ...{ tag, name, family, definition, caution, aliases, neverIndependent },
      position: /^\d+$/.test(place.trim()) ? Number(place) : NaN,
    };
  }

  function check() {
    const given = words();
    if (given === null) {
      refuse({ field: "family", message: "Choose a family." });
      return;
    }
    const others = methods.filter((other) => other.tag !== method?.tag);
    const found = methodProblem(tidyMethod(given), others);
    refuse(found);
    if (found) return;
    // Records change their marker and their filter with the family, so that is asked about.
    if (method && method.family !== family) setAsking(true);
    else void save();
  }

  async function save() {
    setAsking(false);
    const input = words();
    if (input === null) return;
    await send(
      async () =>
        method
          ? (await change({ variables: { input, version: method.version } })).data?.changeMethodTag
          : (await add({ variables: { input } })).data?.addMethodTag,
      () => onDone(method ? `${name.trim()} is changed.` : `${name.trim()} is added.`),
    );
  }

  const moved = method && family !== null && method.family !== family;
  return (
    <>
      <Sheet
        visible={visible && !asking}
        title={method ? `Edit ${method.name}` : "Add a method"}
        onClose={onClose}
        footer={
          <Button
            kind="filled"
            label={method ? "Save" : "Add the method"}
            busy={adding.loading || changing.loading}
            onPress={check}
          />
        }
      >
        {method ? null : (
          <Field
            label="Tag"
            name="tag"
            value={tag}
            onChangeText={setTag}
            maxLength={METHOD_LENGTHS.tag}
            autoComplete="off"
            error={at("tag")}
            hint="One word in camelCase; records carry it, so it never changes."
          />
        )}
        <Field
          label="Name"
          name="name"
          value={name}
          onChangeText={setName}
          maxLength={METHOD_LENGTHS.name}
          error={at("name")}
        />
        <Choice
          label="Family"
          value={family}
          options={METHOD_FAMILIES.map((value) => ({ value, label: FAMILY_NAMES[value] }))}
          onChange={(value) => setFamily(value as MethodFamily | null)}
          error={at("family")}
          hint="Gives its records their marker and the filter they are found by."
        />
        <Field
          label="Definition, in one line"
          name="definition"
          value={definition}
          onChangeText={setDefinition}
          maxLength={METHOD_LENGTHS.definition}
          error={at("definition")}
        />
        <Field
          label="Usual systematic"
          name="caution"
          value={caution}
          onChangeText={setCaution}
          maxLength={METHOD_LENGTHS.caution}
          error={at("caution")}
          hint="Stands as a caution on each of its records."
        />
        <TagField
          label="Other spellings"
          values={aliases}
          onChange={setAliases}
          comparable={looseWord}
          error={at("aliases")}
          hint="As hand-kept lists write it; case and punctuation don't matter."
        />
        <CheckRow
          label="Never independent"
          hint="Its results contain or assume other constraints."
          checked={neverIndependent}
          onChange={setNever}
        />
        <Field
          label="Place in the list"
          name="position"
          value={place}
          onChangeText={setPlace}
          numeric
          inputMode="numeric"
          maxLength={4}
          error={at("position")}
          hint="Lower stands first within the family."
        />
        {problem && !FIELDS.includes(problem.field ?? "") ? (
          <Notice grade="error">{problem.message}</Notice>
        ) : null}
      </Sheet>
      <Confirm
        visible={asking}
        title={moved ? `Move ${method.name} to ${FAMILY_NAMES[family]}?` : ""}
        text={
          moved
            ? `${constraintWords(method.constraintCount)} will be drawn and filtered under ${FAMILY_NAMES[family]} in place of ${FAMILY_NAMES[method.family]}. Saved tables and releases stay as they are.`
            : ""
        }
        confirmLabel="Move it"
        onConfirm={() => void save()}
        onCancel={() => setAsking(false)}
      />
    </>
  );
}
