/** Markers of the method families. */
import type { MethodFamily } from "~shared/methods/vocabulary";

export type MarkerShape =
  "circle" | "square" | "hourglass" | "diamond" | "triangle" | "plus" | "star" | "saltire" | "ring";

/** Shape carries the family; the hue (Paul Tol's muted scheme, adjusted for contrast) supports it. */
export const FAMILY_MARKS: Record<
  MethodFamily,
  { shape: MarkerShape; light: string; dark: string }
> = {
  dampingWing: { shape: "circle", light: "#332288", dark: "#9D94F0" },
  darkPixels: { shape: "square", light: "#882255", dark: "#E37BA8" },
  forestOpacity: { shape: "hourglass", light: "#117733", dark: "#62C07E" },
  luminosityFunction: { shape: "diamond", light: "#B84A60", dark: "#F3A3AE" },
  lineStrength: { shape: "triangle", light: "#AA4499", dark: "#DC8FD2" },
  emitterClustering: { shape: "plus", light: "#6E6E1E", dark: "#C8C860" },
  twentyOneCm: { shape: "star", light: "#1E7D70", dark: "#55C9B5" },
  cmb: { shape: "saltire", light: "#2A78A8", dark: "#88CCEE" },
  other: { shape: "ring", light: "#5B6670", dark: "#AEB9C0" },
};
