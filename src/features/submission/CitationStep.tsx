import { useLazyQuery, useMutation } from "@apollo/client/react";
import { useEffect, useRef, useState } from "react";
import { View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { CitationLine } from "@/components/CitationLine";
import { DefinitionList } from "@/components/DefinitionList";
import { Field } from "@/components/Field";
import { FilePick } from "@/components/FilePick";
import { Loading } from "@/components/feedback/Loading";
import { Notice } from "@/components/Notice";
import { Block, Body, Caption, Dense } from "@/components/Text";
import {
  type CitationLinePartsFragment,
  KeepCitationsDocument,
  PreviewCitationsDocument,
  type PreviewCitationsQuery,
} from "~graphql/generated/graphql";

import { LookUp } from "./LookUp";

type Entry = PreviewCitationsQuery["previewCitations"][number];

const PARSE_DELAY_MS = 600;

/** Finds the paper: pasted or uploaded BibTeX, shown as it will be cited before anything is kept. */
export function CitationStep({
  current,
  busy,
  onChosen,
}: {
  current: CitationLinePartsFragment | null;
  busy?: boolean;
  onChosen: (citation: CitationLinePartsFragment) => void;
}) {
  const [changing, setChanging] = useState(false);
  if (current && !changing) {
    return (
      <View style={{ gap: 16 }}>
        <Card>
          <CitationLine citation={current} />
          <CitationDetails citation={current} />
        </Card>
        <View style={{ flexDirection: "row" }}>
          <Button kind="outline" label="Use another paper" onPress={() => setChanging(true)} />
        </View>
      </View>
    );
  }
  return (
    <View style={{ gap: 16 }}>
      <BibtexEntry
        busy={busy}
        onChosen={(citation) => {
          setChanging(false);
          onChosen(citation);
        }}
      />
      {current ? (
        <View style={{ flexDirection: "row" }}>
          <Button
            kind="text"
            label={`Keep ${current.shortName}`}
            onPress={() => setChanging(false)}
          />
        </View>
      ) : null}
    </View>
  );
}

function BibtexEntry({
  busy,
  onChosen,
}: {
  busy?: boolean;
  onChosen: (citation: CitationLinePartsFragment) => void;
}) {
  const [bibtex, setBibtex] = useState("");
  const [refusal, setRefusal] = useState<string | null>(null);
  const [parse, { data, loading, error }] = useLazyQuery(PreviewCitationsDocument, {
    fetchPolicy: "no-cache",
  });
  const [keep, keeping] = useMutation(KeepCitationsDocument);
  const timer = useRef<ReturnType<typeof setTimeout> | null>(null);
  useEffect(
    () => () => {
      if (timer.current) clearTimeout(timer.current);
    },
    [],
  );

  const typed = (text: string, delay = PARSE_DELAY_MS) => {
    setBibtex(text);
    setRefusal(null);
    if (timer.current) clearTimeout(timer.current);
    if (text.trim() === "") return;
    // A newer text ends the reading of the one before; that is no failure.
    const read = () => void parse({ variables: { bibtex: text } }).catch(() => undefined);
    timer.current = setTimeout(read, delay);
  };

  const choose = async (entry: Entry) => {
    setRefusal(null);
    try {
      const result = await keep({ variables: { bibtex, indices: [entry.index] } });
      const outcome = result.data?.keepCitations;
      if (outcome?.__typename === "KeptCitations") {
        const kept = outcome.kept.find(({ index }) => index === entry.index) ?? outcome.kept[0];
        if (kept) onChosen(kept.citation);
        else setRefusal(outcome.problems[0]?.problem ?? "This entry could not be kept.");
      } else if (outcome) {
        setRefusal(outcome.message);
      }
    } catch (failure) {
      setRefusal(userMessage(failure));
    }
  };

  const entries = bibtex.trim() === "" ? [] : (data?.previewCitations ?? []);
  return (
    <View style={{ gap: 16 }}>
      <LookUp onFound={(text) => typed(text, 0)} />
      <Body>
        Paste the paper&apos;s BibTeX, or pick a .bib file. Several entries are fine; you choose one
        of them.
      </Body>
      <Field
        name="bibtex"
        label="BibTeX"
        multiline
        value={bibtex}
        onChangeText={(text) => typed(text)}
        autoComplete="off"
      />
      <FilePick label="Pick a .bib file" accept=".bib,.txt" onPick={({ text }) => typed(text)} />
      {refusal ? <Notice grade="error">{refusal}</Notice> : null}
      <View aria-live="polite" style={{ gap: 16 }}>
        {loading ? <Loading label="Reading the entries" rows={2} /> : null}
        {error && !loading ? (
          <Notice
            grade="error"
            action={
              <Button
                kind="tonal"
                label="Read again"
                onPress={() => void parse({ variables: { bibtex } }).catch(() => undefined)}
              />
            }
          >
            {userMessage(error)}
          </Notice>
        ) : null}
        {!loading && data && entries.length === 0 && bibtex.trim() !== "" ? (
          <Notice grade="error">
            There is no BibTeX entry in this text. An entry starts with @article{"{"} or the like.
          </Notice>
        ) : null}
        {entries.map((entry) => (
          <EntryCard
            key={entry.index}
            entry={entry}
            busy={busy || keeping.loading}
            onUse={() => void choose(entry)}
          />
        ))}
      </View>
    </View>
  );
}

const MATCHED_BY: Record<string, string> = {
  doi: "by its DOI",
  arxiv: "by its arXiv number",
  bibcode: "by its bibcode",
  title: "by title and year",
};

function EntryCard({ entry, busy, onUse }: { entry: Entry; busy?: boolean; onUse: () => void }) {
  const { citation, existing, problem } = entry;
  if (problem || !citation) {
    return (
      <Notice
        grade="error"
        title={`Entry ${entry.index + 1}${entry.givenKey ? `, ${entry.givenKey}` : ""}, line ${entry.line}`}
      >
        {problem ?? "This entry can't be read."}
      </Notice>
    );
  }
  const shown = existing ?? citation;
  return (
    <Card style={{ gap: 12 }}>
      <Block level={2}>{shown.title}</Block>
      <CitationDetails citation={shown} />
      {existing ? (
        <Notice grade="note">
          {`Already in the registry as ${existing.key}, found ${MATCHED_BY[entry.matchedBy ?? ""] ?? "there"}. That citation is used.`}
        </Notice>
      ) : null}
      {entry.remarks.map((remark) => (
        <Caption key={remark}>{remark}</Caption>
      ))}
      <View style={{ flexDirection: "row" }}>
        <Button kind="filled" label={`Use ${shown.shortName}`} busy={busy} onPress={onUse} />
      </View>
    </Card>
  );
}

interface Cited {
  authors: string[];
  year?: number | null;
  title: string;
  container?: string | null;
  volume?: string | null;
  pages?: string | null;
  doi?: string | null;
  arxiv?: string | null;
  bibcode?: string | null;
}

const AUTHORS_SHOWN = 8;

function CitationDetails({ citation }: { citation: Cited }) {
  const { authors } = citation;
  const more = authors.length - AUTHORS_SHOWN;
  const names = authors.slice(0, AUTHORS_SHOWN).join("; ") + (more > 0 ? `; and ${more} more` : "");
  const published = [citation.container, citation.volume, citation.pages]
    .filter(Boolean)
    .join(", ");
  const items: [string, string | null | undefined][] = [
    ["Authors", names],
    ["Year", citation.year?.toString()],
    ["Title", citation.title],
    ["Journal", published],
    ["DOI", citation.doi],
    ["arXiv", citation.arxiv],
    ["Bibcode", citation.bibcode],
  ];
  return (
    <DefinitionList
      items={items.map(([term, value]) => ({
        term,
        value: value ? value : <Dense muted>not given</Dense>,
      }))}
    />
  );
}
