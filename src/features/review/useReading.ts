import { useState } from "react";

import { plainFields } from "@/components/statement/plainFields";
import { changeShape, type Stash } from "@/components/statement/printedFields";
import type { SetField } from "@/components/statement/FieldInput";
import { type ConstraintFields, emptyFields, type FieldName } from "~shared/statement/fields";

function keyOf(id: string): string {
  return `fogline.reading.${id}`;
}

function kept(id: string): ConstraintFields {
  try {
    const text = globalThis.localStorage?.getItem(keyOf(id));
    return text ? plainFields(JSON.parse(text) as Partial<ConstraintFields>) : emptyFields();
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
  const [state, setState] = useState<{ fields: ConstraintFields; stash: Stash }>(() => ({
    fields: kept(id),
    stash: {},
  }));
  const set: SetField = (name, value) =>
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
    });
  const forget = () => {
    try {
      globalThis.localStorage?.removeItem(keyOf(id));
    } catch {
      // As above.
    }
  };
  return { fields: state.fields, set, forget };
}
