import { useState } from "react";

import { plainFields } from "@/components/statement/plainFields";
import { changeShape, type Stash } from "@/components/statement/printedFields";
import type { SetReading } from "@/components/statement/CurveReading";
import { CURVE_FACTS, type ReadingContent } from "~shared/review/reading";
import { emptyFields, type FieldName } from "~shared/statement/fields";

function keyOf(id: string): string {
  return `fogline.reading.${id}`;
}

function kept(id: string): ReadingContent {
  try {
    const text = globalThis.localStorage?.getItem(keyOf(id));
    if (!text) return emptyFields();
    const held = JSON.parse(text) as Partial<ReadingContent>;
    const reading: ReadingContent = plainFields(held);
    for (const name of CURVE_FACTS) if (held[name]) reading[name] = held[name];
    return reading;
  } catch {
    return emptyFields();
  }
}

const SHAPING: ReadonlySet<FieldName> = new Set<FieldName>([
  "quantity",
  "kind",
  "species",
  "level",
]);

/**
 * What an editor has typed of a second reading. It starts empty, never from the submission, and is
 * kept in this browser until it is stored.
 */
export function useReading(id: string) {
  const [state, setState] = useState<{ fields: ReadingContent; stash: Stash }>(() => ({
    fields: kept(id),
    stash: {},
  }));
  const set = ((name: FieldName, value: never) =>
    setState((before) => {
      const next = SHAPING.has(name)
        ? changeShape(before.fields, name, value, before.stash)
        : { ...before, fields: { ...before.fields, [name]: value } };
      try {
        globalThis.localStorage?.setItem(keyOf(id), JSON.stringify(next.fields));
      } catch {
        // Without storage the reading lives as long as the page.
      }
      return next;
    })) as SetReading;
  const forget = () => {
    try {
      globalThis.localStorage?.removeItem(keyOf(id));
    } catch {
      // As above.
    }
  };
  return { fields: state.fields, set, forget };
}
