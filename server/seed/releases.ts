import { cutRelease } from "~server/release/release.service";

import { done, type Stage, type Step } from "./stage";

/** The two releases of the story; the erratum and the withdrawal that came later stand as notices. */
const RELEASES: readonly { at: string; notes: string }[] = [
  {
    at: "2026-07-31T12:00:00Z",
    notes:
      "The first release: quasars, dark pixels, emitters, the microwave background, and what the summer brought.",
  },
  {
    at: "2026-10-30T12:00:00Z",
    notes:
      "Adds curves, gaps and durations; one stack of bursts is withdrawn, one early limit superseded.",
  },
];

export function releaseSteps(stage: Stage): Step[] {
  return RELEASES.map(({ at, notes }) => ({
    at: new Date(at),
    tell: async (now) => {
      done(await cutRelease(stage.as("maintainer", now), notes), "release");
    },
  }));
}
