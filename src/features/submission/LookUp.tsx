import { useMutation, useQuery } from "@apollo/client/react";
import { useState } from "react";
import { View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { Caption } from "@/components/Text";
import { useLayoutClass } from "@/layout/useLayoutClass";
import { LooksUpCitationsDocument, LookUpCitationDocument } from "~graphql/generated/graphql";

/**
 * Fetches a paper by its DOI or arXiv number; what comes is BibTeX, read like pasted text. Not
 * there where the registry has no service to ask.
 */
export function LookUp({ onFound }: { onFound: (bibtex: string) => void }) {
  const compact = useLayoutClass() === "compact";
  const { data } = useQuery(LooksUpCitationsDocument, { fetchPolicy: "no-cache" });
  const [identifier, setIdentifier] = useState("");
  const [refusal, setRefusal] = useState<{ message: string; field: string | null } | null>(null);
  const [said, setSaid] = useState<string | null>(null);
  const [lookUp, { loading }] = useMutation(LookUpCitationDocument);
  if (!data?.session.looksUpCitations) return null;

  const send = async () => {
    if (loading) return;
    setRefusal(null);
    setSaid(null);
    try {
      const result = (await lookUp({ variables: { identifier } })).data?.lookUpCitation;
      if (result?.__typename === "LookedUpCitation") {
        setSaid(
          result.known ? "The registry has this paper." : "Found. Check it against the paper.",
        );
        onFound(result.bibtex);
      } else {
        const message = result?.message ?? "The server gave no answer. Paste the BibTeX instead.";
        setRefusal({ message, field: result?.field ?? null });
      }
    } catch (error) {
      setRefusal({ message: userMessage(error), field: null });
    }
  };

  return (
    <View style={{ gap: 8 }}>
      <View
        style={{
          flexDirection: compact ? "column" : "row",
          alignItems: compact ? "stretch" : "flex-start",
          gap: 12,
        }}
      >
        <View style={{ flexGrow: 1, flexShrink: 1, minWidth: 0 }}>
          <Field
            name="identifier"
            label="DOI or arXiv number"
            value={identifier}
            onChangeText={setIdentifier}
            onSubmit={() => void send()}
            error={refusal?.field === "identifier" ? refusal.message : null}
            autoComplete="off"
            maxLength={300}
          />
        </View>
        <View style={{ paddingTop: compact ? 0 : 14, flexDirection: "row" }}>
          <Button
            kind="tonal"
            icon="magnify"
            label="Look it up"
            busy={loading}
            onPress={() => void send()}
          />
        </View>
      </View>
      <View aria-live="polite">{said ? <Caption>{said}</Caption> : null}</View>
      {refusal && refusal.field !== "identifier" ? (
        <Notice grade="error">{refusal.message}</Notice>
      ) : null}
    </View>
  );
}
