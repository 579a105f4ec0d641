import { useCallback, useEffect, useMemo, useRef, useState } from "react";
import { useLocalSearchParams, useRouter } from "expo-router";
import {
  DEFAULT_MODELS,
  MAX_MODELS,
  type Model,
  type ModelKind,
  modelsToParam,
  newModel,
  paramToModels,
} from "./models";

/** The address follows the sliders once they rest: a write per move would cost frames. */
const REST_MS = 400;

export interface Models {
  models: readonly Model[];
  change(id: string, key: string, value: number): void;
  toggle(id: string): void;
  add(kind: ModelKind): void;
  remove(id: string): void;
}

/** Model histories of the page, kept in its address. */
export function useModels(): Models {
  const params = useLocalSearchParams<{ models?: string }>();
  const router = useRouter();
  const [models, setModels] = useState<readonly Model[]>(() => paramToModels(params.models));
  const touched = useRef(false);

  useEffect(() => {
    if (!touched.current) return undefined;
    const text = modelsToParam(models);
    const timer = setTimeout(
      () => router.setParams({ models: text === modelsToParam(DEFAULT_MODELS) ? undefined : text }),
      REST_MS,
    );
    return () => clearTimeout(timer);
  }, [models, router]);

  const update = useCallback((next: (models: readonly Model[]) => readonly Model[]) => {
    touched.current = true;
    setModels(next);
  }, []);
  const change = useCallback(
    (id: string, key: string, value: number) =>
      update((all) =>
        all.map((model) =>
          model.id === id ? { ...model, values: { ...model.values, [key]: value } } : model,
        ),
      ),
    [update],
  );
  const toggle = useCallback(
    (id: string) =>
      update((all) =>
        all.map((model) => (model.id === id ? { ...model, visible: !model.visible } : model)),
      ),
    [update],
  );
  const add = useCallback(
    (kind: ModelKind) =>
      update((all) => {
        if (all.length >= MAX_MODELS) return all;
        const free = ["a", "b", "c"].find((id) => all.every((model) => model.id !== id)) ?? "c";
        return [...all, newModel(kind, free)];
      }),
    [update],
  );
  const remove = useCallback(
    (id: string) => update((all) => all.filter((model) => model.id !== id)),
    [update],
  );
  return useMemo(
    () => ({ models, change, toggle, add, remove }),
    [models, change, toggle, add, remove],
  );
}
