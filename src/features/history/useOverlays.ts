import { useMemo, useState } from "react";
import type { HistoryLook } from "@/charts/looks";
import { HISTORY_LOOKS } from "@/charts/looks";
import type { Background } from "~shared/cosmology/background";
import type { History } from "~shared/history/history";
import { historyOfModel, type Model, modelNames } from "./models";
import { type Readout, readoutOf } from "./readouts";
import { type HistoryScore, type ScoredRows, scoreHistory } from "./scoring";

/** A model with all that is shown of it. */
export interface Overlay {
  id: string;
  name: string;
  look: HistoryLook;
  model: Model;
  history: History;
  readout: Readout;
  score: HistoryScore;
}

type Entry = Pick<Overlay, "history" | "readout">;
type Compute = (
  models: readonly Model[],
  decided: ScoredRows,
  background: Background,
) => readonly (Overlay | null)[];

/** Remembers the numbers of the models it computed last, by what their sliders say. */
function rememberingCompute(): Compute {
  let known = new Map<string, Entry>();
  const scores = new WeakMap<ScoredRows, Map<History, HistoryScore>>();
  return (models, decided, background) => {
    const names = modelNames(models);
    const next = new Map<string, Entry>();
    const scored = scores.get(decided) ?? new Map<History, HistoryScore>();
    const fresh = new Map<History, HistoryScore>();
    const overlays = models.map((model, index): Overlay | null => {
      const key = `${model.kind} ${Object.values(model.values).join(" ")}`;
      let entry = next.get(key) ?? known.get(key);
      if (!entry) {
        const history = historyOfModel(model);
        entry = { history, readout: readoutOf(history, background) };
      }
      next.set(key, entry);
      if (!model.visible) return null;
      const score = scored.get(entry.history) ?? scoreHistory(decided, entry.history, background);
      fresh.set(entry.history, score);
      return {
        id: model.id,
        name: names[index] ?? "",
        look: HISTORY_LOOKS[index] ?? "third",
        model,
        ...entry,
        score,
      };
    });
    known = next;
    scores.set(decided, fresh);
    return overlays;
  };
}

/**
 * Computes what the visible models show. A model whose sliders rest keeps its numbers, so that a
 * move costs one history and its readouts.
 */
export function useOverlays(
  ...[models, decided, background]: Parameters<Compute>
): ReturnType<Compute> {
  const [compute] = useState(rememberingCompute);
  return useMemo(
    () => compute(models, decided, background),
    [compute, models, decided, background],
  );
}
