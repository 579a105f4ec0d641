import { useRef } from "react";

/** The newest complete answer: while a changed filter is fetched, the list on screen stays. */
export function useLatest<T>(data: T | undefined): T | undefined {
  const latest = useRef<T | undefined>(undefined);
  if (data !== undefined) latest.current = data;
  return latest.current;
}
