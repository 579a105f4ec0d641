import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { LikelihoodCurve } from "@/charts/LikelihoodCurve";
import { Button } from "@/components/Button";
import { Choice } from "@/components/Choice";
import { DefinitionList } from "@/components/DefinitionList";
import { Field } from "@/components/Field";
import { NotationText } from "@/components/NotationText";
import { Sheet } from "@/components/Sheet";
import { Block, Caption, Dense } from "@/components/Text";
import { FAMILY_MARKS } from "@/theme/families";
import { useTheme } from "@/theme/ThemeProvider";
import { space } from "@/theme/tokens";
import type { LikelihoodForm } from "~graphql/generated/graphql";
import { FORM_WORDS, rowLikelihood } from "~shared/likelihood";
import { familyOf } from "~shared/methods/vocabulary";
import { asUsed } from "~shared/statement/asUsed";
import { notationAsPrinted, notationAsUsed, recordTitle } from "~shared/statement/notation";
import { REASON_LONGEST } from "~shared/table/decision";

import type { BuiltRow } from "./BuilderRow";
import type { FormChoice } from "./useTableDraft";

const POINTS = 161;

/** A row's likelihood with the form to choose, and whether it is taken out by hand. */
export function RowSheet({
  built,
  choice,
  out,
  onForm,
  onOut,
  onClose,
}: {
  built: BuiltRow;
  choice: FormChoice | null;
  /** The reason given for taking it out; null while it isn't. */
  out: string | null;
  onForm: (choice: FormChoice | null) => void;
  onOut: (reason: string | null) => void;
  onClose: () => void;
}) {
  const { constraint, row } = built;
  const { fields } = constraint;
  const used = asUsed(fields);
  const [byDefault] = row.forms;
  const form = choice?.form ?? row.form ?? null;
  return (
    <Sheet
      visible
      title={constraint.citation.shortName}
      onClose={onClose}
      footer={<Button label="Done" kind="filled" onPress={onClose} />}
    >
      <View style={styles.all}>
        <Dense muted>{recordTitle(fields)}</Dense>
        <DefinitionList
          items={[
            {
              term: "As printed",
              value: <NotationText notation={notationAsPrinted(fields)} symbol />,
            },
            {
              term: "As used",
              value: used ? <NotationText notation={notationAsUsed(used)} symbol /> : "not usable",
            },
          ]}
        />
        <View style={styles.part}>
          <Block level={2}>Likelihood</Block>
          <Curve built={built} form={form} />
          {row.forms.length > 1 ? (
            <Choice
              label="Form"
              value={form}
              options={row.forms.map((name) => ({
                value: name,
                label: name === byDefault ? `${FORM_WORDS[name]} (default)` : FORM_WORDS[name],
              }))}
              onChange={(value) => {
                const name = value as LikelihoodForm | null;
                onForm(
                  name === null || name === byDefault
                    ? null
                    : { form: name, reason: choice?.reason ?? "" },
                );
              }}
            />
          ) : null}
          {choice ? (
            <Field
              label="Why this form"
              value={choice.reason}
              onChangeText={(reason) => onForm({ ...choice, reason })}
              maxLength={REASON_LONGEST}
              hint="It counts once the reason is there; every download carries it."
            />
          ) : null}
        </View>
        <View style={styles.part}>
          <Block level={2}>{row.included ? "In the table" : "Out of the table"}</Block>
          {row.included ? null : <Dense>{row.reason}</Dense>}
          <TakeOut out={out} onOut={onOut} included={row.included} />
        </View>
        <Button
          label="Open the record"
          icon="open-in-new"
          href={`/constraints/${constraint.number}`}
        />
      </View>
    </Sheet>
  );
}

function TakeOut({
  out,
  included,
  onOut,
}: {
  out: string | null;
  included: boolean;
  onOut: (reason: string | null) => void;
}) {
  const [asking, setAsking] = useState(out !== null);
  if (!asking && included) {
    return (
      <Button label="Take it out" kind="return" icon="minus" onPress={() => setAsking(true)} />
    );
  }
  if (!asking && out === null) {
    return <Caption muted>A decision or a rule keeps it out; see the decisions.</Caption>;
  }
  return (
    <View style={styles.part}>
      <Field
        label="Why it is taken out"
        value={out ?? ""}
        onChangeText={(text) => onOut(text)}
        maxLength={REASON_LONGEST}
        hint="It is out once the reason is there."
      />
      <Button
        label="Put it back"
        kind="text"
        icon="undo"
        onPress={() => {
          onOut(null);
          setAsking(false);
        }}
      />
    </View>
  );
}

function Curve({
  built: { constraint, row },
  form,
}: {
  built: BuiltRow;
  form: LikelihoodForm | null;
}) {
  const { scheme } = useTheme();
  const used = asUsed(constraint.fields);
  if (used === null || form === null) {
    return <Dense muted>{row.reason ?? "No likelihood yet."}</Dense>;
  }
  const level = used.level === null && row.level ? { level: row.level } : {};
  const mass = used.weighting === "mass" ? { acceptMassWeighted: true } : {};
  const likelihood = rowLikelihood(used, { form, ...level, ...mass });
  if ("leftOut" in likelihood) return <Dense muted>{likelihood.leftOut}</Dense>;
  const family = familyOf(constraint.fields.methodTags);
  return (
    <View style={styles.part}>
      <LikelihoodCurve
        lines={[{ ...likelihood.curve(POINTS), label: FORM_WORDS[form] }]}
        hue={family ? FAMILY_MARKS[family][scheme] : undefined}
      />
      <Caption muted>{likelihood.formula}</Caption>
      {likelihood.warnings.map(({ code, text }) => (
        <Caption key={code}>{text}</Caption>
      ))}
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.m },
  part: { gap: space.xs },
});
