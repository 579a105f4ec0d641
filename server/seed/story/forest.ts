import { pixels, type StoryRecord } from "./kinds";

/** The forest: dark pixels, gaps and opacities. */
export const FOREST: readonly StoryRecord[] = [
  {
    paper: "darkPixels",
    by: "second",
    reader: "secondEditor",
    from: "2026-03-09T15:02:00Z",
    fate: "approved",
    fields: pixels({
      zLow: "5.42",
      zHigh: "5.64",
      limitBase: "0.05",
      limitSigma: "0.03",
      place: "Eq. 8",
      page: "91",
      printedText: "x_HI <= 0.05 + 0.03 (1 sigma), 5.42 < z < 5.64",
    }),
  },
  {
    paper: "darkPixels",
    by: "second",
    reader: "secondEditor",
    from: "2026-03-09T15:20:00Z",
    fate: "approved",
    fields: pixels({
      zLow: "5.86",
      zHigh: "6.14",
      limitBase: "0.13",
      limitSigma: "0.07",
      place: "Eq. 9",
      page: "91",
      printedText: "x_HI <= 0.13 + 0.07 (1 sigma), 5.86 < z < 6.14",
    }),
  },
  {
    paper: "darkPixels",
    by: "second",
    reader: "secondEditor",
    from: "2026-03-09T15:34:00Z",
    fate: "approvedTwice",
    fields: pixels({
      zLow: "6.14",
      zHigh: "6.48",
      value: "0.71",
      level: "twoSigma",
      place: "Eq. 10",
      page: "92",
      printedText: "x_HI < 0.71 (2 sigma), 6.14 < z < 6.48",
    }),
    slip: { place: "Eq. 9", page: null },
  },
];
