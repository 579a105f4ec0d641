import { useState } from "react";

/** The newest complete answer: while a changed filter is fetched, the list on screen stays. */
export function useLatest<T>(data: T | undefined): T | undefined {
  const [latest, setLatest] = useState(data);
  if (data !== undefined && data !== latest) setLatest(data);
  return data ?? latest;
}
