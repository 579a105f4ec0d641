import { useEffect, useState } from "react";

import type { LikelihoodForm, TableInput, TableVisibility } from "~graphql/generated/graphql";

/** A choice about a decision; one that still needs its reason is kept, and settles nothing yet. */
export interface DecisionChoice {
  option: string;
  byDefault: boolean;
  reason: string;
}

export interface FormChoice {
  form: LikelihoodForm;
  reason: string;
}

/** The table being built, beside its filter, which stands in the address. */
export interface TableDraft {
  name: string;
  visibility: TableVisibility;
  notify: boolean;
  /** The release its rows come from; null for the latest approved records. */
  release: number | null;
  decisions: Record<string, DecisionChoice>;
  /** Rows taken out by hand, each with its reason. */
  out: Record<string, string>;
  forms: Record<string, FormChoice>;
  /** The table of one's own that gets a new version. */
  slug: string | null;
  adaptedFrom: string | null;
}

const STORED_AS = "fogline.tableRecipe";
export const EMPTY_DRAFT: TableDraft = {
  name: "",
  visibility: "public",
  notify: false,
  release: null,
  decisions: {},
  out: {},
  forms: {},
  slug: null,
  adaptedFrom: null,
};

function stored(): TableDraft {
  try {
    const text = globalThis.localStorage?.getItem(STORED_AS);
    return { ...EMPTY_DRAFT, ...(text ? (JSON.parse(text) as Partial<TableDraft>) : {}) };
  } catch {
    return EMPTY_DRAFT; // storage can be forbidden or hold something else
  }
}

function without<T>(map: Record<string, T>, key: string): Record<string, T> {
  const { [key]: _old, ...others } = map;
  return others;
}

/** The table being built; neither a reload nor a closed window loses it. */
export function useTableDraft() {
  const [draft, setDraft] = useState<TableDraft>(stored);
  useEffect(() => {
    try {
      globalThis.localStorage?.setItem(STORED_AS, JSON.stringify(draft));
    } catch {
      // Without storage the table is kept as long as the page is open.
    }
  }, [draft]);
  const change = (part: Partial<TableDraft>) => setDraft((before) => ({ ...before, ...part }));
  return {
    draft,
    change,
    replace: setDraft,
    decide: (id: string, choice: DecisionChoice | null) =>
      setDraft((before) => ({
        ...before,
        decisions: choice ? { ...before.decisions, [id]: choice } : without(before.decisions, id),
      })),
    // A choice of one's own that has its reason stays, though the server has not answered it yet.
    takeProposals: (proposals: readonly { id: string; proposed: string }[]) =>
      setDraft((before) => {
        const said = (id: string): boolean => {
          const own = before.decisions[id];
          return own !== undefined && !own.byDefault && own.reason.trim() !== "";
        };
        const taken = proposals
          .filter(({ id }) => !said(id))
          .map(({ id, proposed }) => [id, { option: proposed, byDefault: true, reason: "" }]);
        return {
          ...before,
          decisions: {
            ...before.decisions,
            ...(Object.fromEntries(taken) as typeof before.decisions),
          },
        };
      }),
    takeOut: (number: string, reason: string | null) =>
      setDraft((before) => ({
        ...before,
        out: reason === null ? without(before.out, number) : { ...before.out, [number]: reason },
      })),
    setForm: (number: string, choice: FormChoice | null) =>
      setDraft((before) => ({
        ...before,
        forms: choice ? { ...before.forms, [number]: choice } : without(before.forms, number),
      })),
    clear: () => setDraft(EMPTY_DRAFT),
  };
}

/** The recipe as the server takes it: what still lacks a reason is left out. */
export function recipeOf(draft: TableDraft, filter: TableInput["filter"]): TableInput {
  const said = (reason: string): boolean => reason.trim() !== "";
  return {
    release: draft.release,
    filter,
    decisions: Object.entries(draft.decisions).map(([id, { option, byDefault, reason }]) => ({
      id,
      option,
      byDefault,
      reason: byDefault || !said(reason) ? null : reason.trim(),
    })),
    out: Object.entries(draft.out)
      .filter(([, reason]) => said(reason))
      .map(([number, reason]) => ({ number, reason: reason.trim() })),
    forms: Object.entries(draft.forms)
      .filter(([, { reason }]) => said(reason))
      .map(([number, { form, reason }]) => ({ number, form, reason: reason.trim() })),
  };
}
