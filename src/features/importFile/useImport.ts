import { useMutation } from "@apollo/client/react";
import { useRef, useState } from "react";

import { userMessage } from "@/apollo/userMessage";
import {
  type ImportInput,
  PreviewImportDocument,
  type PreviewImportMutation,
  RunImportDocument,
  type RunImportMutation,
} from "~graphql/generated/graphql";

import { uploadFile } from "./upload";

export interface PickedFile {
  name: string;
  text: string;
}

export type Preview = Extract<
  PreviewImportMutation["previewImport"],
  { __typename: "ImportPreview" }
>;
export type Done = Extract<RunImportMutation["runImport"], { __typename: "ImportDone" }>;

interface Uploads {
  csvUploadId: string;
  bibUploadId: string;
}

/** What the person settled, laid over what the server proposes. */
export interface Match {
  /** Column to field; null leaves the column out. */
  columns: Record<string, string | null>;
  /** "field word" to value; null leaves the field open where the word stands. */
  words: Record<string, string | null>;
}

export function wordKey(field: string, word: string): string {
  return `${field} ${word}`;
}

/** Upload, match, preview and import of one list; every choice shows its effect in a new preview. */
export function useImport() {
  const [uploads, setUploads] = useState<Uploads | null>(null);
  const [match, setMatch] = useState<Match>({ columns: {}, words: {} });
  const [preview, setPreview] = useState<Preview | null>(null);
  const [done, setDone] = useState<Done | null>(null);
  const [problem, setProblem] = useState<string | null>(null);
  const [busy, setBusy] = useState(false);
  const [askPreview] = useMutation(PreviewImportDocument);
  const [askRun] = useMutation(RunImportDocument);
  // Of several previews under way only the last one asked for is shown.
  const asked = useRef(0);

  const inputOf = (to: Uploads, chosen: Match, seen: Preview | null): ImportInput => ({
    ...to,
    columns: seen?.columns.map(({ column, proposedField }) => ({
      column,
      field: column in chosen.columns ? chosen.columns[column]! : (proposedField ?? null),
    })),
    words: seen?.words.map(({ field, word, proposed }) => {
      const key = wordKey(field, word);
      return { field, word, value: key in chosen.words ? chosen.words[key]! : (proposed ?? null) };
    }),
  });

  async function refresh(to: Uploads, chosen: Match, seen: Preview | null) {
    const turn = ++asked.current;
    setBusy(true);
    setProblem(null);
    try {
      const { data } = await askPreview({ variables: { input: inputOf(to, chosen, seen) } });
      if (turn !== asked.current) return;
      const outcome = data?.previewImport;
      if (outcome?.__typename === "ImportPreview") setPreview(outcome);
      else setProblem(outcome?.message ?? "The server gave no answer. Try again.");
    } catch (error) {
      if (turn === asked.current) setProblem(userMessage(error));
    } finally {
      if (turn === asked.current) setBusy(false);
    }
  }

  return {
    preview,
    match,
    done,
    problem,
    busy,
    async read(csv: PickedFile, bib: PickedFile): Promise<boolean> {
      setBusy(true);
      setProblem(null);
      const [list, papers] = await Promise.all([uploadFile("csv", csv), uploadFile("bib", bib)]);
      if ("problem" in list || "problem" in papers) {
        const problems = [list, papers].flatMap((one) => ("problem" in one ? [one.problem] : []));
        setProblem(problems.join(" "));
        setBusy(false);
        return false;
      }
      const to = { csvUploadId: list.id, bibUploadId: papers.id };
      setUploads(to);
      setMatch({ columns: {}, words: {} });
      setPreview(null);
      await refresh(to, { columns: {}, words: {} }, null);
      return true;
    },
    setColumn(column: string, field: string | null) {
      if (!uploads) return;
      const columns = { ...match.columns };
      // A field takes one column: the one it stood at before lets it go.
      for (const other of preview?.columns ?? []) {
        const now = other.column in columns ? columns[other.column] : other.proposedField;
        if (field !== null && now === field) columns[other.column] = null;
      }
      columns[column] = field;
      const next = { ...match, columns };
      setMatch(next);
      void refresh(uploads, next, preview);
    },
    setWord(field: string, word: string, value: string | null) {
      if (!uploads) return;
      const next = { ...match, words: { ...match.words, [wordKey(field, word)]: value } };
      setMatch(next);
      void refresh(uploads, next, preview);
    },
    again() {
      if (uploads) void refresh(uploads, match, preview);
    },
    async run() {
      if (!uploads) return;
      setBusy(true);
      setProblem(null);
      try {
        const { data } = await askRun({ variables: { input: inputOf(uploads, match, preview) } });
        const outcome = data?.runImport;
        if (outcome?.__typename === "ImportDone") setDone(outcome);
        else setProblem(outcome?.message ?? "The server gave no answer. Try again.");
      } catch (error) {
        setProblem(userMessage(error));
      } finally {
        setBusy(false);
      }
    },
  };
}
