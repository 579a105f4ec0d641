import { useSyncExternalStore } from "react";

let lost = false;
const listeners = new Set<() => void>();

/** Called by the link after each answer or failure. */
export function reportConnection(isLost: boolean): void {
  if (isLost === lost) return;
  lost = isLost;
  listeners.forEach((listener) => listener());
}

function subscribe(listener: () => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

/** Whether the last request found no server. */
export function useConnectionLost(): boolean {
  return useSyncExternalStore(
    subscribe,
    () => lost,
    () => false,
  );
}
