import { useQuery } from "@apollo/client/react";
import { useMemo } from "react";
import { View } from "react-native";

import { NamedDataNamesDocument } from "~graphql/generated/graphql";
import { comparableDataName } from "~shared/dependence/dataName";
import { DATA_KIND_WORDS } from "~shared/dependence/namedData";
import type { ConstraintFields } from "~shared/statement/fields";

import { CheckRow } from "../CheckRow";
import { TagField } from "../TagField";
import type { SetField } from "./FieldInput";

/** Named data of a constraint; names that the registry knows are offered while typing. */
export function DataUsedInput({
  fields,
  set,
  label,
  error,
}: {
  fields: Pick<ConstraintFields, "dataUsed" | "dataKnown">;
  set: SetField;
  label: string;
  error?: string;
}) {
  const { data } = useQuery(NamedDataNamesDocument, { skip: fields.dataKnown === false });
  const known = useMemo(() => {
    const words = new Map<string, string>();
    for (const { name, kind, aliases } of data?.namedDataList ?? []) {
      const word = kind === "unknown" ? "" : `, ${DATA_KIND_WORDS[kind].toLowerCase()}`;
      words.set(name, `${name}${word}`);
      for (const alias of aliases) words.set(alias, `${alias}, a name of ${name}`);
    }
    return words;
  }, [data]);
  return (
    <View style={{ gap: 8 }}>
      {fields.dataKnown !== false && (
        <TagField
          label={label}
          hint="A name that the registry knows is offered while you type; a new one is fine."
          error={error}
          values={fields.dataUsed}
          suggestions={[...known.keys()]}
          suggestionWords={(name) => known.get(name) ?? name}
          comparable={comparableDataName}
          onChange={(values) => {
            set("dataUsed", values);
            set("dataKnown", values.length > 0 ? true : null);
          }}
        />
      )}
      <CheckRow
        label="The paper doesn't say which data it used"
        hint="Unknown is a value: it is shown as a caution, never taken for none."
        checked={fields.dataKnown === false}
        onChange={(checked) => {
          set("dataKnown", checked ? false : null);
          if (checked) set("dataUsed", []);
        }}
      />
    </View>
  );
}
