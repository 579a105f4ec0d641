import type { ReactNode } from "react";
import { View } from "react-native";

import { Choice } from "@/components/Choice";
import { CheckRow } from "@/components/CheckRow";
import { Field } from "@/components/Field";
import Icon from "@/components/Icon";
import { Segments } from "@/components/Segments";
import { TagField } from "@/components/TagField";
import { Caption } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import type { ConstraintFields, FieldName, StatementKind } from "~shared/statement/fields";
import {
  COSMIC_VARIANCES,
  CURVE_COLUMNS,
  DURATION_UNITS,
  ESTIMATORS,
  HELIUM,
  LEVELS,
  QUANTITIES,
  REDSHIFT_ROLES,
  SCALES,
  SPECIES,
  VERSIONS_READ,
  WEIGHTINGS,
} from "~shared/statement/fields";
import { isNumberField } from "~shared/statement/relevant";
import { PRINTED_TEXT_LONGEST } from "~shared/statement/rules";
import {
  COSMIC_VARIANCE_WORDS,
  CURVE_COLUMN_WORDS,
  DURATION_UNIT_WORDS,
  ESTIMATOR_WORDS,
  FIELD_NAMES,
  HELIUM_WORDS,
  LEVEL_WORDS,
  QUANTITY_WORDS,
  ROLE_WORDS,
  SCALE_WORDS,
  VERSION_WORDS,
  WEIGHTING_WORDS,
} from "~shared/statement/words";

import { ConditionPicker } from "./ConditionPicker";
import { DataUsedInput } from "./DataUsedInput";
import { KindGlyph } from "./KindGlyph";
import { MethodPicker } from "./MethodPicker";
import { RecordPicker } from "./RecordPicker";
import type { SetField } from "./setField";

export type { SetField } from "./setField";

export interface FieldInputProps {
  name: FieldName;
  fields: ConstraintFields;
  set: SetField;
  error?: string;
  label?: string;
  hint?: string;
  onBlur?: () => void;
}

/** Statements in the order of how often papers make them. */
const OFFERED_KINDS: readonly { kind: StatementKind; label: string }[] = [
  { kind: "twoSided", label: "value" },
  { kind: "upperLimit", label: "upper" },
  { kind: "lowerLimit", label: "lower" },
  { kind: "band", label: "band" },
  { kind: "curve", label: "curve" },
  { kind: "qualitative", label: "words" },
];

const SPECIES_SHORT: Record<(typeof SPECIES)[number], string> = {
  neutral: "Neutral",
  ionized: "Ionized",
  electron: "Electron",
};

const LONG: ReadonlySet<FieldName> = new Set<FieldName>([
  "printedText",
  "furtherIntervals",
  "historyAssumed",
  "heliumAssumed",
  "truncationAssumed",
  "remark",
]);

interface Words {
  values: readonly string[];
  words: Readonly<Record<string, string>>;
}

const CHOICES: Partial<Record<FieldName, Words>> = {
  quantity: { values: QUANTITIES, words: QUANTITY_WORDS },
  helium: { values: HELIUM, words: HELIUM_WORDS },
  scale: { values: SCALES, words: SCALE_WORDS },
  weighting: { values: WEIGHTINGS, words: WEIGHTING_WORDS },
  level: { values: LEVELS, words: LEVEL_WORDS },
  estimator: { values: ESTIMATORS, words: ESTIMATOR_WORDS },
  zRole: { values: REDSHIFT_ROLES, words: ROLE_WORDS },
  cosmicVariance: { values: COSMIC_VARIANCES, words: COSMIC_VARIANCE_WORDS },
  versionRead: { values: VERSIONS_READ, words: VERSION_WORDS },
  durationUnit: { values: DURATION_UNITS, words: DURATION_UNIT_WORDS },
  curveColumn: { values: CURVE_COLUMNS, words: CURVE_COLUMN_WORDS },
};

/** Id of the element around one field's input, where focus goes when the field is named. */
export function fieldAnchor(name: FieldName): string {
  return `field-${name}`;
}

/** Moves the focus into a field's input and scrolls it into view. */
export function focusField(name: FieldName): void {
  if (typeof document === "undefined") return;
  // Whether the data are known is asked beside the data themselves.
  const shown = name === "dataKnown" ? "dataUsed" : name;
  const anchor = document.getElementById(fieldAnchor(shown));
  const input = anchor?.querySelector<HTMLElement>(
    "input, select, textarea, [role=radio], button, [tabindex='0']",
  );
  input?.focus();
  anchor?.scrollIntoView({ block: "center" });
}

/** The input of one field of the record, whatever its kind. */
export function FieldInput(props: FieldInputProps) {
  return (
    <View nativeID={fieldAnchor(props.name)}>
      <Input {...props} />
    </View>
  );
}

function Input(props: FieldInputProps) {
  const { name, fields, set, error, hint } = props;
  const label = props.label ?? FIELD_NAMES[name];
  switch (name) {
    case "species":
      return (
        <WithError error={error}>
          <Segments
            label={label}
            value={fields.species}
            options={SPECIES.map((value) => ({ value, label: SPECIES_SHORT[value] }))}
            onChange={(value) => set("species", value as ConstraintFields["species"])}
          />
        </WithError>
      );
    case "kind":
      return (
        <WithError error={error}>
          <KindSegments {...props} label={label} />
        </WithError>
      );
    case "methodTags":
      return (
        <MethodPicker
          label={label}
          tags={fields.methodTags}
          error={error}
          onChange={(tags) => set("methodTags", tags)}
        />
      );
    case "conditionedOn":
      return (
        <ConditionPicker
          label={label}
          values={fields.conditionedOn}
          error={error}
          onChange={(values) => set("conditionedOn", values)}
        />
      );
    case "dataUsed":
      return <DataUsedInput fields={fields} set={set} label={label} error={error} />;
    case "supersedes":
    case "erratumOf":
    case "reanalysisOf":
    case "subsetOf":
      return (
        <RecordPicker
          label={label}
          hint={hint}
          error={error}
          values={fields[name]}
          onChange={(values) => set(name, values)}
        />
      );
    case "modelTags":
      return (
        <TagField
          label={label}
          values={fields.modelTags}
          onChange={(values) => set("modelTags", values)}
        />
      );
    case "readOffFigure":
    case "alternativesPreferred":
      return (
        <CheckRow
          label={label}
          hint={hint}
          checked={fields[name] === true}
          onChange={(checked) => set(name, checked)}
        />
      );
    case "dataKnown":
      return (
        <CheckRow
          label="The paper says which data it used"
          checked={fields.dataKnown === true}
          onChange={(checked) => set("dataKnown", checked)}
        />
      );
    default:
      return CHOICES[name] ? (
        <EnumChoice {...props} label={label} />
      ) : (
        <TextInput {...props} label={label} />
      );
  }
}

/** The error of a control that has no room for one itself. */
function WithError({ error, children }: { error?: string; children: ReactNode }) {
  const colors = useColors();
  return (
    <View style={{ gap: 4 }}>
      {children}
      {error ? (
        <View style={{ flexDirection: "row", gap: 6, paddingLeft: 12 }}>
          <Icon name="close-circle-outline" size={16} color={colors.emberText} />
          <Caption style={{ color: colors.emberText, flex: 1 }}>{error}</Caption>
        </View>
      ) : null}
    </View>
  );
}

function KindSegments({ fields, set, label }: FieldInputProps & { label: string }) {
  const colors = useColors();
  return (
    <Segments
      label={label}
      value={fields.kind}
      options={OFFERED_KINDS.map(({ kind, label: word }) => ({
        value: kind,
        label: word,
        glyph: <KindGlyph kind={kind} color={fields.kind === kind ? colors.primary : colors.ink} />,
      }))}
      onChange={(value) => set("kind", value as StatementKind)}
    />
  );
}

function EnumChoice({
  name,
  fields,
  set,
  error,
  hint,
  label,
}: FieldInputProps & { label: string }) {
  const { values, words } = CHOICES[name]!;
  return (
    <Choice
      label={label}
      value={fields[name] as string | null}
      options={values.map((value) => ({ value, label: words[value] ?? value }))}
      placeholder="Choose"
      error={error}
      hint={hint}
      onChange={(value) => set(name, value as never)}
    />
  );
}

function TextInput({
  name,
  fields,
  set,
  error,
  hint,
  label,
  onBlur,
}: FieldInputProps & { label: string }) {
  const text = (fields[name] as string | null) ?? "";
  const numeric = isNumberField(name) || name === "digitizingError";
  return (
    <Field
      name={name}
      label={label}
      value={text}
      numeric={numeric}
      inputMode={numeric ? "decimal" : undefined}
      multiline={LONG.has(name)}
      maxLength={name === "printedText" ? PRINTED_TEXT_LONGEST : undefined}
      hint={
        hint ??
        (name === "printedText"
          ? `Exactly as it stands, ${text.length} of ${PRINTED_TEXT_LONGEST}`
          : undefined)
      }
      error={error}
      onBlur={onBlur}
      onChangeText={(next) => set(name, (next === "" ? null : next) as never)}
    />
  );
}
