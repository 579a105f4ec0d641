import { useEffect, useState } from "react";

/** What a person chose against the proposal, by record number. */
export interface RowChoice {
  included: boolean;
  reason: string;
}

export interface TableDraft {
  name: string;
  choices: Record<string, RowChoice>;
}

const STORED_AS = "fogline.tableDraft";
const EMPTY: TableDraft = { name: "", choices: {} };

function stored(): TableDraft {
  try {
    const text = globalThis.sessionStorage?.getItem(STORED_AS);
    const draft = text ? (JSON.parse(text) as Partial<TableDraft>) : {};
    return { name: draft.name ?? "", choices: draft.choices ?? {} };
  } catch {
    return EMPTY; // storage can be forbidden or hold something else
  }
}

/** The table being built; a reload of the tab loses nothing. */
export function useTableDraft(): {
  draft: TableDraft;
  setName(name: string): void;
  choose(number: string, choice: RowChoice | null): void;
  clear(): void;
} {
  const [draft, setDraft] = useState<TableDraft>(stored);
  useEffect(() => {
    try {
      globalThis.sessionStorage?.setItem(STORED_AS, JSON.stringify(draft));
    } catch {
      // Without storage the table is kept as long as the page is open.
    }
  }, [draft]);
  return {
    draft,
    setName: (name) => setDraft((before) => ({ ...before, name })),
    choose: (number, choice) =>
      setDraft((before) => {
        const { [number]: _old, ...others } = before.choices;
        return { ...before, choices: choice ? { ...others, [number]: choice } : others };
      }),
    clear: () => setDraft(EMPTY),
  };
}
