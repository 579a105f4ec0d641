import { View } from "react-native";

import { CheckRow } from "@/components/CheckRow";
import { Label } from "@/components/Text";
import { CONDITION_KINDS } from "~shared/statement/fields";
import { CONDITION_WORDS } from "~shared/statement/words";

import { RecordPicker } from "./RecordPicker";

const KINDS: readonly string[] = CONDITION_KINDS;

/** Kinds of data and records that a constraint already contains. */
export function ConditionPicker({
  label,
  values,
  error,
  onChange,
}: {
  label: string;
  values: string[];
  error?: string;
  onChange: (values: string[]) => void;
}) {
  const records = values.filter((value) => !KINDS.includes(value));
  return (
    <View role="group" aria-label={label} style={{ gap: 4 }}>
      <Label>{label}</Label>
      {CONDITION_KINDS.map((kind) => (
        <CheckRow
          key={kind}
          label={CONDITION_WORDS[kind]}
          checked={values.includes(kind)}
          onChange={(checked) =>
            onChange(checked ? [...values, kind] : values.filter((value) => value !== kind))
          }
        />
      ))}
      <View style={{ marginTop: 8 }}>
        <RecordPicker
          label="Records of this registry"
          values={records}
          error={error}
          onChange={(next) =>
            onChange([...values.filter((value) => KINDS.includes(value)), ...next])
          }
        />
      </View>
    </View>
  );
}
