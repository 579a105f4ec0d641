import { useMutation } from "@apollo/client/react";
import { useState } from "react";

import { Button } from "@/components/Button";
import { Choice } from "@/components/Choice";
import { Notice } from "@/components/Notice";
import { Sheet } from "@/components/Sheet";
import { Body, Dense } from "@/components/Text";
import { RetireMethodTagDocument } from "~graphql/generated/graphql";
import { FAMILY_NAMES } from "~shared/methods/vocabulary";

import { byFamily, constraintWords, type KeptMethod } from "./families";
import { useChange } from "./useChange";

/** Asks which method takes a retired one over. The sheet itself is the one question. */
export function RetireSheet({
  visible,
  method,
  methods,
  onClose,
  onDone,
}: {
  visible: boolean;
  method: KeptMethod;
  methods: readonly KeptMethod[];
  onClose: () => void;
  onDone: (words: string) => void;
}) {
  const [into, setInto] = useState<string | null>(null);
  const [retire, { loading }] = useMutation(RetireMethodTagDocument);
  const { problem, send } = useChange();
  const { tag, version, name, constraintCount } = method;
  const options = byFamily(methods)
    .flatMap(({ members }) => members)
    .filter((other) => other.tag !== tag)
    .map((other) => ({ value: other.tag, label: `${other.name} (${FAMILY_NAMES[other.family]})` }));
  const next = methods.find((other) => other.tag === into);

  async function run() {
    if (into === null) return;
    await send(
      async () => (await retire({ variables: { tag, version, into } })).data?.retireMethodTag,
      () => onDone(`${name} is retired; ${next?.name ?? "the other method"} took it over.`),
    );
  }

  return (
    <Sheet
      visible={visible}
      title={`Retire ${name}`}
      onClose={onClose}
      footer={
        <Button
          kind="return"
          label="Retire it for good"
          busy={loading}
          disabledBecause={into === null ? "Choose what takes it over first." : undefined}
          onPress={() => void run()}
        />
      }
    >
      <Body>
        It becomes a word for another method. Nothing that a record says is rewritten, and saved
        tables and releases stay as they are.
      </Body>
      <Choice label="Taken over by" value={into} options={options} onChange={setInto} />
      {next ? (
        <Dense muted>
          {constraintCount === 0
            ? "No constraint carries it yet."
            : `${constraintWords(constraintCount)} will be shown and found under ${next.name}.`}
          {next.family === method.family
            ? ""
            : ` That is another family: ${FAMILY_NAMES[next.family]}.`}
        </Dense>
      ) : null}
      {problem ? <Notice grade="error">{problem.message}</Notice> : null}
    </Sheet>
  );
}
