import type { History } from "~shared/history/history";
import { powerLawHistory } from "~shared/history/powerLaw";
import { tanhHistory } from "~shared/history/tanh";

export type ModelKind = "tanh" | "powerLaw";

export interface Model {
  id: string;
  kind: ModelKind;
  /** By the name of the parameter, see MODEL_KINDS. */
  values: Readonly<Record<string, number>>;
  visible: boolean;
}

export interface Parameter {
  key: string;
  name: string;
  symbol: string;
  min: number;
  max: number;
  step: number;
  digits: number;
  start: number;
}

/** Families a reader can move: ranges are the priors' of a fit, starts are conventional values. */
export const MODEL_KINDS: Record<
  ModelKind,
  { name: string; parameters: readonly Parameter[]; aside: string | null }
> = {
  tanh: {
    name: "tanh",
    aside: null,
    parameters: [
      {
        key: "zRe",
        name: "Midpoint",
        symbol: "z_re",
        min: 5,
        max: 12,
        step: 0.01,
        digits: 2,
        start: 7.67,
      },
      {
        key: "deltaZ",
        name: "Width",
        symbol: "Δz",
        min: 0.1,
        max: 3,
        step: 0.01,
        digits: 2,
        start: 0.5,
      },
    ],
  },
  powerLaw: {
    name: "power law",
    aside: "z_early",
    parameters: [
      {
        key: "zEnd",
        name: "End",
        symbol: "z_end",
        min: 4,
        max: 9,
        step: 0.01,
        digits: 2,
        start: 6,
      },
      {
        key: "alpha",
        name: "Exponent",
        symbol: "α",
        min: 0.5,
        max: 12,
        step: 0.1,
        digits: 1,
        start: 8,
      },
    ],
  },
};

export const MAX_MODELS = 3;

export function newModel(kind: ModelKind, id: string): Model {
  const values = Object.fromEntries(
    MODEL_KINDS[kind].parameters.map(({ key, start }) => [key, start]),
  );
  return { id, kind, values, visible: true };
}

export function historyOfModel({ kind, values }: Model): History {
  return kind === "tanh"
    ? tanhHistory({ zRe: values.zRe ?? 7.67, deltaZ: values.deltaZ ?? 0.5 })
    : powerLawHistory({ zEnd: values.zEnd ?? 6, alpha: values.alpha ?? 8 });
}

/** Words for a model when several of one family stand side by side: "tanh", "tanh 2". */
export function modelNames(models: readonly Model[]): string[] {
  return models.map((model, index) => {
    const before = models.slice(0, index).filter((other) => other.kind === model.kind).length;
    const name = MODEL_KINDS[model.kind].name;
    return before === 0 ? name : `${name} ${before + 1}`;
  });
}

export const DEFAULT_MODELS: readonly Model[] = [newModel("tanh", "a"), newModel("powerLaw", "b")];

/** Models as one parameter of an address: "tanh_7.67_0.5,powerLaw_6_8_off"; "none" for an empty list. */
export function modelsToParam(models: readonly Model[]): string {
  if (models.length === 0) return "none";
  return models
    .map(({ kind, values, visible }) =>
      [
        kind,
        ...MODEL_KINDS[kind].parameters.map(({ key }) => values[key]),
        ...(visible ? [] : ["off"]),
      ].join("_"),
    )
    .join(",");
}

/** Reads them back; what is mistyped falls back to the start of its slider. */
export function paramToModels(text: string | undefined): readonly Model[] {
  if (text === undefined || text === "") return DEFAULT_MODELS;
  if (text === "none") return [];
  const models = text
    .split(",")
    .slice(0, MAX_MODELS)
    .flatMap((part, index): Model[] => {
      const [kind, ...numbers] = part.split("_");
      if (kind !== "tanh" && kind !== "powerLaw") return [];
      const values = Object.fromEntries(
        MODEL_KINDS[kind].parameters.map(({ key, min, max, start }, i) => {
          const value = Number(numbers[i]);
          const usable = numbers[i] !== undefined && numbers[i] !== "" && Number.isFinite(value);
          return [key, usable ? Math.min(max, Math.max(min, value)) : start];
        }),
      );
      return [
        { id: String.fromCharCode(97 + index), kind, values, visible: numbers.at(-1) !== "off" },
      ];
    });
  return models.length > 0 ? models : DEFAULT_MODELS;
}
