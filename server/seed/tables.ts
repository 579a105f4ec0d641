import type { EntityManager } from "typeorm";

import { Refusal } from "~server/common/outcomes";
import type { ConstraintFilterInput } from "~server/constraint/constraint.type";
import type { Acting } from "~server/event/acting";
import type { TableRecipe } from "~server/table/recipe";
import { follow } from "~server/table/settle.service";
import type { Visibility } from "~server/table/table.entity";
import { saveRecipe } from "~server/table/version.service";
import { canonicalFilter } from "~shared/filter/address";
import { takeProposal, type TakenDecision } from "~shared/table/decision";

import type { PersonName } from "./people";
import { done, type Stage, type Step } from "./stage";

/** The fitting tables of the story, each with every proposal taken; the last is for its owner only. */
export function tableSteps(stage: Stage): Step[] {
  return [
    {
      at: new Date("2026-10-29T15:00:00Z"),
      tell: (at) =>
        recipeTable(stage, at, "contributor", "Damping wings, 6 to 8", {
          families: ["dampingWing"],
          zFrom: 6,
          zTo: 8,
        }),
    },
    {
      at: new Date("2026-11-04T09:30:00Z"),
      tell: (at) =>
        recipeTable(stage, at, "reader", "Everything that says how late", { zFrom: 5.4, zTo: 7 }),
    },
    {
      at: new Date("2026-11-13T16:45:00Z"),
      tell: (at) =>
        recipeTable(stage, at, "second", "Emitters and the sky behind them", {
          families: ["luminosityFunction", "lineStrength", "emitterClustering", "cmb"],
        }),
    },
    {
      at: new Date("2026-11-20T10:10:00Z"),
      tell: (at) =>
        recipeTable(
          stage,
          at,
          "contributor",
          "First try, forests only",
          { families: ["darkPixels", "forestOpacity"] },
          "private",
        ),
    },
  ];
}

const MOST_ROUNDS = 60;

/** What the program proposes for every decision that a filter raises; what one settles can raise others. */
export async function takenProposals(
  manager: EntityManager,
  viewer: Acting["viewer"],
  recipe: Pick<TableRecipe, "filter" | "release"> & { out?: TableRecipe["choices"]["out"] },
): Promise<TakenDecision[]> {
  let decisions: TakenDecision[] = [];
  for (let round = 0; round < MOST_ROUNDS; round += 1) {
    const { release, filter, out = [] } = recipe;
    const choices = { decisions, out, forms: [] };
    const followed = await follow(manager, viewer, { release, filter, choices });
    if (followed instanceof Refusal) throw new Error(followed.message);
    const open = followed.settled.decisions.filter(({ taken }) => taken === null);
    if (open.length === 0) break;
    decisions = [...decisions, ...open.map(takeProposal)];
  }
  return decisions;
}

/** A fitting table whose every decision is its proposal. */
async function recipeTable(
  stage: Stage,
  at: Date,
  owner: PersonName,
  name: string,
  filter: ConstraintFilterInput,
  visibility: Visibility = "public",
): Promise<void> {
  const who = stage.as(owner, at);
  const recipe = { release: null, filter: canonicalFilter(filter) };
  const decisions = await takenProposals(stage.manager, who.viewer, recipe);
  done(
    await saveRecipe(who, {
      name,
      visibility,
      recipe: {
        filter,
        decisions: decisions.map(({ id, option }) => ({ id, option, byDefault: true })),
      },
    }),
    `table ${name}`,
  );
}
