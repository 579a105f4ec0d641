import { useMutation } from "@apollo/client/react";
import { useRouter } from "expo-router";
import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { useSession } from "@/apollo/useSession";
import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { CheckRow, RadioRows } from "@/components/CheckRow";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Dense, Section } from "@/components/Text";
import { space } from "@/theme/tokens";
import {
  SaveRecipeDocument,
  type TableInput,
  type TableVisibility,
} from "~graphql/generated/graphql";

import type { TableDraft } from "./useTableDraft";

export const VISIBILITY_WORDS: Record<TableVisibility, string> = {
  public: "Public, and listed",
  link: "Whoever has the address",
  private: "Only you",
};

/** Name, visibility and the one step that gives the table its address. */
export function SaveTable({
  draft,
  recipe,
  rowsIn,
  open,
  onChange,
  onSaved,
}: {
  draft: TableDraft;
  recipe: TableInput;
  rowsIn: number;
  open: number;
  onChange: (part: Partial<TableDraft>) => void;
  onSaved: () => void;
}) {
  const router = useRouter();
  const { viewer } = useSession();
  const [failure, setFailure] = useState<string | null>(null);
  const [save, { loading }] = useMutation(SaveRecipeDocument, {
    // Lists and the table itself are asked anew when they are next shown.
    update: (cache) => {
      cache.evict({ id: "ROOT_QUERY", fieldName: "fittingTables" });
      cache.evict({ id: "ROOT_QUERY", fieldName: "fittingTable" });
    },
  });
  const because =
    rowsIn === 0
      ? "No row is in."
      : open > 0
        ? open === 1
          ? "One decision is open."
          : `${open} decisions are open.`
        : draft.name.trim() === ""
          ? "Give the table a name."
          : undefined;

  async function press() {
    setFailure(null);
    try {
      const { data } = await save({
        variables: {
          input: {
            slug: draft.slug,
            adaptedFrom: draft.adaptedFrom,
            name: draft.name.trim(),
            visibility: draft.visibility,
            notify: draft.notify,
            recipe,
          },
        },
      });
      const result = data?.saveRecipe;
      if (result?.__typename === "FittingTable") {
        onSaved();
        router.replace(`/tables/${result.slug}` as never);
      } else setFailure(result?.message ?? "The table was not saved. Try again.");
    } catch (error) {
      setFailure(userMessage(error));
    }
  }

  return (
    <View style={styles.all}>
      <Section>{draft.slug ? "Save a new version" : "Save"}</Section>
      <Dense muted>
        Saving gives the table a permanent address. What its rows say is copied, so that the bytes
        of a version never change; decisions and reasons go along.
      </Dense>
      <Field
        label="Name of the table"
        value={draft.name}
        onChangeText={(name) => onChange({ name })}
        maxLength={120}
      />
      <RadioRows
        label="Who sees it"
        value={draft.visibility}
        options={(Object.keys(VISIBILITY_WORDS) as TableVisibility[]).map((value) => ({
          value,
          label: VISIBILITY_WORDS[value],
        }))}
        onChange={(value) => onChange({ visibility: value as TableVisibility })}
      />
      <CheckRow
        label="Tell me by mail when a release would change it"
        checked={draft.notify}
        onChange={(notify) => onChange({ notify })}
      />
      {failure ? <Notice grade="error">{failure}</Notice> : null}
      {viewer ? (
        <Button
          label={draft.slug ? "Save the new version" : "Save the table"}
          kind="filled"
          icon="content-save-outline"
          busy={loading}
          disabledBecause={because}
          onPress={() => void press()}
        />
      ) : (
        <Button label="Sign in to save" kind="filled" icon="login" href="/account/sign-in" />
      )}
    </View>
  );
}

const styles = StyleSheet.create({ all: { gap: space.s } });
