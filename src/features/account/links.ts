import type { Href } from "expo-router";

/** Where to go after signing in: an address of ours, never one that a link from elsewhere chose. */
export function returnAddress(next: string | string[] | undefined): Href {
  const path = Array.isArray(next) ? next[0] : next;
  const ours = path?.startsWith("/") && !/^\/[/\\]/.test(path) && !path.startsWith("/account/");
  return (ours ? path : "/desk") as Href;
}

export function withNext(path: string, next: string | string[] | undefined): string {
  return next ? `${path}?next=${encodeURIComponent(String(next))}` : path;
}
