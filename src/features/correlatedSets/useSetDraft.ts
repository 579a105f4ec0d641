import { useMutation } from "@apollo/client/react";
import { useEffect, useRef, useState } from "react";

import { isConnectionLost, userMessage } from "@/apollo/userMessage";
import { SaveSetDocument, type CorrelatedSetPartsFragment } from "~graphql/generated/graphql";
import type { SetContent } from "~shared/correlatedSet/content";

export interface SetDraft extends SetContent {
  /** Answers to findings that must be answered, by code. */
  answers: Record<string, string>;
}

export type SetSave =
  | { kind: "saved" }
  | { kind: "waiting" }
  | { kind: "saving" }
  /** Not on the server; the text is kept in this browser. */
  | { kind: "trouble"; message: string; stale: boolean };

const DELAY_MS = 800;
const RETRY_MS = 5_000;

function keyOf(number: string): string {
  return `fogline.set.${number}`;
}

export function draftOf(set: CorrelatedSetPartsFragment): SetDraft {
  return {
    label: set.label ?? null,
    members: set.members.map(({ number }) => number),
    matrixKind: set.matrixKind ?? null,
    triangle: set.triangle.map((row) => [...row]),
    place: set.place ?? null,
    page: set.page ?? null,
    note: set.note ?? null,
    answers: Object.fromEntries(set.answers.map(({ code, answer }) => [code, answer])),
  };
}

/** What this browser holds beyond the server's copy, if it was typed over that very version. */
function unsaved(set: CorrelatedSetPartsFragment): SetDraft | null {
  try {
    const text = globalThis.localStorage?.getItem(keyOf(set.number));
    const kept = text ? (JSON.parse(text) as { version: number; draft: SetDraft }) : null;
    return kept?.version === set.version ? kept.draft : null;
  } catch {
    return null; // storage can be forbidden or hold something else
  }
}

function keep(number: string, version: number, draft: SetDraft | null): void {
  try {
    if (draft) {
      globalThis.localStorage?.setItem(keyOf(number), JSON.stringify({ version, draft }));
    } else globalThis.localStorage?.removeItem(keyOf(number));
  } catch {
    // Without storage the text lives as long as the page.
  }
}

/** A set while it is typed: saved by itself shortly after, kept in the browser until then. */
export function useSetDraft(set: CorrelatedSetPartsFragment) {
  const [save] = useMutation(SaveSetDocument);
  const [draft, setDraft] = useState<SetDraft>(() => unsaved(set) ?? draftOf(set));
  const [state, setState] = useState<SetSave>(() =>
    unsaved(set) ? { kind: "waiting" } : { kind: "saved" },
  );
  const latest = useRef(draft);
  const version = useRef(set.version);
  const running = useRef<Promise<boolean> | null>(null);
  const timer = useRef<ReturnType<typeof setTimeout> | null>(null);

  async function send(): Promise<boolean> {
    const sent = latest.current;
    setState({ kind: "saving" });
    try {
      const { answers, ...content } = sent;
      const { data } = await save({
        variables: {
          input: {
            number: set.number,
            version: version.current,
            ...content,
            answers: Object.entries(answers).map(([code, answer]) => ({ code, answer })),
          },
        },
      });
      const outcome = data?.saveSet;
      if (outcome?.__typename === "CorrelatedSet") {
        version.current = outcome.version;
        if (latest.current === sent) {
          keep(set.number, outcome.version, null);
          setState({ kind: "saved" });
          return true;
        }
        keep(set.number, outcome.version, latest.current);
        return send();
      }
      setState({
        kind: "trouble",
        message: outcome?.message ?? "The server gave no answer. Try again.",
        stale: outcome?.__typename === "Refusal" && outcome.code === "stale",
      });
    } catch (error) {
      setState({ kind: "trouble", message: userMessage(error), stale: false });
      if (isConnectionLost(error)) timer.current = setTimeout(() => void flush(), RETRY_MS);
    }
    return false;
  }

  /** Saves now; true when the server holds everything. */
  async function flush(): Promise<boolean> {
    if (timer.current) clearTimeout(timer.current);
    running.current ??= send().finally(() => {
      running.current = null;
    });
    return running.current;
  }

  function change(part: Partial<SetDraft>): void {
    const next = { ...latest.current, ...part };
    latest.current = next;
    setDraft(next);
    keep(set.number, version.current, next);
    setState((before) =>
      before.kind === "trouble" && before.stale ? before : { kind: "waiting" },
    );
    if (timer.current) clearTimeout(timer.current);
    timer.current = setTimeout(() => void flush(), DELAY_MS);
  }

  useEffect(() => {
    if (state.kind === "waiting" && !timer.current) {
      timer.current = setTimeout(() => void flush(), DELAY_MS);
    }
    return () => {
      if (timer.current) clearTimeout(timer.current);
    };
    // Only what a reload brought back is sent from here; typing starts its own clock.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, []);

  return { draft, change, state, flush, version };
}
