import { useRef, useState } from "react";

import { userMessage } from "@/apollo/userMessage";

interface Refusal {
  __typename: "Refusal";
  message: string;
  field?: string | null;
}

export interface Outcome<Good> {
  busy: boolean;
  good: Good | null;
  /** Refusal of one entry, by the entry's name. */
  at: (field: string) => string | undefined;
  /** Refusal that belongs to no entry of the form, or a failure. */
  problem: string | null;
  problemField: string | null;
  run: (send: () => Promise<Good | Refusal | undefined>) => Promise<Good | null>;
}

/**
 * Sends something and keeps what came of it: done, refused at an entry, refused as a whole, failed.
 *
 * @param fields - Names of the form's entries; a refusal of any other name stands below the form.
 */
export function useOutcome<Good extends { __typename: string }>(
  fields: readonly string[],
): Outcome<Good> {
  const [busy, setBusy] = useState(false);
  // Enter and a press can come in one tick, before the state says that one is under way.
  const underWay = useRef(false);
  const [good, setGood] = useState<Good | null>(null);
  const [refusal, setRefusal] = useState<{ message: string; field: string | null } | null>(null);
  const field = refusal?.field && fields.includes(refusal.field) ? refusal.field : null;
  return {
    busy,
    good,
    at: (name) => (field === name ? refusal?.message : undefined),
    problem: refusal && field === null ? refusal.message : null,
    problemField: field,
    async run(send) {
      if (underWay.current) return null;
      underWay.current = true;
      setBusy(true);
      setRefusal(null);
      setGood(null);
      try {
        const result = await send();
        if (!result) {
          setRefusal({ message: "The server gave no answer. Try again.", field: null });
          return null;
        }
        if (result.__typename === "Refusal") {
          const { message, field: at } = result as Refusal;
          setRefusal({ message, field: at ?? null });
          return null;
        }
        setGood(result as Good);
        return result as Good;
      } catch (error) {
        setRefusal({ message: userMessage(error), field: null });
        return null;
      } finally {
        underWay.current = false;
        setBusy(false);
      }
    },
  };
}
