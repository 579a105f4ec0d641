import { useState } from "react";

import { fitTriangle } from "~shared/correlatedSet/content";
import type { SetReadingContent } from "~shared/correlatedSet/reading";

function keyOf(number: string): string {
  return `fogline.setReading.${number}`;
}

function kept(number: string, size: number): SetReadingContent {
  const empty: SetReadingContent = { matrixKind: null, triangle: fitTriangle([], size) };
  try {
    const text = globalThis.localStorage?.getItem(keyOf(number));
    const read = text ? (JSON.parse(text) as SetReadingContent) : null;
    return read ? { ...read, triangle: fitTriangle(read.triangle, size) } : empty;
  } catch {
    return empty;
  }
}

/**
 * What an editor has typed of a matrix. It starts empty, never from the submission, and is kept in
 * this browser until it is stored.
 */
export function useSetReading(number: string, size: number) {
  const [content, setContent] = useState(() => kept(number, size));
  const set = (next: SetReadingContent) => {
    setContent(next);
    try {
      globalThis.localStorage?.setItem(keyOf(number), JSON.stringify(next));
    } catch {
      // Without storage the reading lives as long as the page.
    }
  };
  const forget = () => {
    try {
      globalThis.localStorage?.removeItem(keyOf(number));
    } catch {
      // As above.
    }
  };
  return { content, set, forget };
}
