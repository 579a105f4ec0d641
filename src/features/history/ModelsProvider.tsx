import { createContext, type ReactNode, useContext, useMemo } from "react";
import type { Background } from "~shared/cosmology/background";
import type { ScoredRows } from "./scoring";
import { type Models, useModels } from "./useModels";
import { type Overlay, useOverlays } from "./useOverlays";

interface Live {
  state: Models;
  /** A place per model; null where it is hidden. */
  overlays: readonly (Overlay | null)[];
  visible: readonly Overlay[];
}

const LiveContext = createContext<Live | null>(null);

/**
 * Holds the models apart from the screen: a slider's move then draws only what shows a model, and
 * stays within a frame.
 */
export function ModelsProvider({
  decided,
  background,
  children,
}: {
  decided: ScoredRows;
  background: Background;
  children: ReactNode;
}) {
  const state = useModels();
  const overlays = useOverlays(state.models, decided, background);
  const live = useMemo(
    () => ({
      state,
      overlays,
      visible: overlays.filter((overlay): overlay is Overlay => overlay !== null),
    }),
    [state, overlays],
  );
  return <LiveContext.Provider value={live}>{children}</LiveContext.Provider>;
}

/** The models as they stand now. */
export function useLive(): Live {
  const live = useContext(LiveContext);
  if (live === null) throw new Error("useLive needs a ModelsProvider above it.");
  return live;
}
