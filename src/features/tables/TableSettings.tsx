import { useMutation } from "@apollo/client/react";
import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { CheckRow, RadioRows } from "@/components/CheckRow";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Sheet } from "@/components/Sheet";
import { space } from "@/theme/tokens";
import {
  ChangeTableDocument,
  type TableBySlugQuery,
  type TableVisibility,
} from "~graphql/generated/graphql";

import { VISIBILITY_WORDS } from "./SaveTable";

type Table = NonNullable<TableBySlugQuery["fittingTable"]>;

/** What is no part of a table's content: its name, who sees it, whether its owner is told. */
export function TableSettings({ table }: { table: Table }) {
  const [open, setOpen] = useState(false);
  return (
    <>
      <Button label="Name and visibility" icon="pencil-outline" onPress={() => setOpen(true)} />
      {open ? <SettingsSheet table={table} onClose={() => setOpen(false)} /> : null}
    </>
  );
}

function SettingsSheet({ table, onClose }: { table: Table; onClose: () => void }) {
  const [name, setName] = useState(table.name);
  const [visibility, setVisibility] = useState(table.visibility);
  const [notify, setNotify] = useState(table.notify);
  const [failure, setFailure] = useState<string | null>(null);
  const [change, { loading }] = useMutation(ChangeTableDocument, {
    update: (cache) => {
      cache.evict({ id: "ROOT_QUERY", fieldName: "fittingTables" });
      cache.evict({ id: "ROOT_QUERY", fieldName: "fittingTable" });
    },
  });
  async function press() {
    setFailure(null);
    try {
      const { data } = await change({
        variables: { slug: table.slug, name: name.trim(), visibility, notify },
      });
      const result = data?.changeTable;
      if (result?.__typename === "FittingTable") onClose();
      else setFailure(result?.message ?? "Nothing was changed. Try again.");
    } catch (error) {
      setFailure(userMessage(error));
    }
  }
  return (
    <Sheet
      visible
      title="Name and visibility"
      onClose={onClose}
      footer={
        <Button
          label="Keep"
          kind="filled"
          busy={loading}
          disabledBecause={name.trim() === "" ? "Give the table a name." : undefined}
          onPress={() => void press()}
        />
      }
    >
      <View style={styles.all}>
        <Field label="Name of the table" value={name} onChangeText={setName} maxLength={120} />
        <RadioRows
          label="Who sees it"
          value={visibility}
          options={(Object.keys(VISIBILITY_WORDS) as TableVisibility[]).map((value) => ({
            value,
            label: VISIBILITY_WORDS[value],
          }))}
          onChange={(value) => setVisibility(value as TableVisibility)}
        />
        <CheckRow
          label="Tell me by mail when a release would change it"
          checked={notify}
          onChange={setNotify}
        />
        {failure ? <Notice grade="error">{failure}</Notice> : null}
      </View>
    </Sheet>
  );
}

const styles = StyleSheet.create({ all: { gap: space.s } });
