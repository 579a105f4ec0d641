import { useSyncExternalStore } from "react";

import { methodTags, onVocabularyChange, type MethodTag } from "~shared/methods/vocabulary";

/** The methods in use; whoever lists them is drawn again when a maintainer has changed them. */
export function useMethodTags(): readonly MethodTag[] {
  return useSyncExternalStore(onVocabularyChange, methodTags, methodTags);
}
