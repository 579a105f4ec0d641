import { reviseSet, saveSet, startSet, submitSet } from "~server/correlatedSet/draft";
import { approveSet, claimSet, returnSet, storeSetReading } from "~server/correlatedSet/review";
import { formatSetNumber } from "~shared/identifiers/setNumber";
import type { MatrixKind } from "~shared/correlatedSet/content";

import type { PaperName } from "./papers";
import type { PersonName } from "./people";
import { DAY_MS, done, HOUR_MS, type Stage, type Step } from "./stage";

/** A correlated set of the story. */
export interface StorySet {
  paper: PaperName;
  by: PersonName;
  reader: PersonName;
  from: string;
  /** Approved after a return, or waiting for its second reading. */
  fate: "approvedAfterReturn" | "submitted";
  label: string;
  /** Names of records. */
  members: readonly string[];
  matrixKind: MatrixKind;
  triangle: string[][];
  /** What was typed at first, where it was returned. */
  slip?: string[][];
  comment?: string;
  place: string;
  page: string;
  note?: string;
}

export const SETS: readonly StorySet[] = [
  {
    paper: "twoBins",
    by: "contributor",
    reader: "editor",
    from: "2026-06-15T09:00:00Z",
    fate: "approvedAfterReturn",
    label: "Two bins of the forest's opacity",
    members: ["lowerBin", "upperBin"],
    matrixKind: "correlation",
    triangle: [["1"], ["0.60", "1"]],
    slip: [["1"], ["0.06", "1"]],
    comment: "Row 2, column 1: I read 0.60 in Table 5, and the text says “strongly correlated”.",
    place: "Table 5",
    page: "74",
    note: "From the same mock spectra for both bins; cosmic variance is in it.",
  },
  {
    paper: "threeQuasars",
    by: "contributor",
    reader: "secondEditor",
    from: "2026-11-16T10:00:00Z",
    fate: "submitted",
    label: "Three quasars with one continuum model",
    members: ["firstWing", "secondWing", "farWing"],
    matrixKind: "correlation",
    triangle: [["1"], ["0.24", "1"], ["0.21", "0.28", "1"]],
    place: "Appendix B",
    page: "131",
  },
];

/** Drafted, submitted, returned and answered, read again and approved. */
export function setSteps(stage: Stage, story: StorySet): Step[] {
  const begin = new Date(story.from);
  const after = (days: number, hours = 0): Date =>
    new Date(begin.getTime() + days * DAY_MS + hours * HOUR_MS);
  const members = (): string[] => story.members.map((name) => stage.numberOf(name));
  let number = "";

  const save = async (at: Date, version: number, triangle: string[][]): Promise<void> => {
    const who = stage.as(story.by, at);
    const { label, matrixKind, place, page, note } = story;
    const saved = done(
      await saveSet(who, {
        number,
        version,
        label,
        members: members(),
        matrixKind,
        triangle,
        place,
        page,
        note: note ?? null,
      }),
      "set",
    );
    done(await submitSet(who, number, saved.version, true), "submission of a set");
  };
  const read = async (at: Date): Promise<number> => {
    const who = stage.as(story.reader, at);
    done(await claimSet(who, number), "claim of a set");
    const { matrixKind, triangle } = story;
    return done(await storeSetReading(who, number, { matrixKind, triangle }), "reading of a set")
      .version;
  };

  const steps: Step[] = [
    {
      at: begin,
      tell: async (at) => {
        const who = stage.as(story.by, at);
        const citation = await stage.citation(story.paper, who);
        const set = done(await startSet(who, citation, members()), "new set");
        number = formatSetNumber(set.id);
        await save(at, set.version, story.slip ?? story.triangle);
      },
    },
  ];
  if (story.fate === "submitted") return steps;
  return [
    ...steps,
    {
      at: after(2),
      tell: async (at) => {
        const version = await read(at);
        const who = stage.as(story.reader, at);
        done(await returnSet(who, number, version, story.comment ?? ""), "return of a set");
      },
    },
    {
      at: after(3),
      tell: async (at) => {
        const set = done(await reviseSet(stage.as(story.by, at), number), "answer to a set");
        number = formatSetNumber(set.id);
        await save(at, set.version, story.triangle);
      },
    },
    {
      at: after(4),
      tell: async (at) => {
        const version = await read(at);
        const who = stage.as(story.reader, at);
        done(await approveSet(who, number, version, [], null), "approval of a set");
      },
    },
  ];
}
