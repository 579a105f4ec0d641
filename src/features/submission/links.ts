import type { Href } from "expo-router";

export const STEPS = ["paper", "printed", "method", "check"] as const;
export type StepKey = (typeof STEPS)[number];

export const DESK = "/desk";

/** Address of a submission, at one step of its form. */
export function submissionLink(id: string, step?: StepKey): Href {
  return (step ? `/desk/submit/${id}?step=${step}` : `/desk/submit/${id}`) as Href;
}
