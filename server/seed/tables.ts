import { findApproved } from "~server/constraint/constraint.query";
import { Refusal } from "~server/common/outcomes";
import type { ConstraintFilterInput } from "~server/constraint/constraint.type";
import { follow } from "~server/table/settle.service";
import { saveTable } from "~server/table/table.service";
import { saveRecipe } from "~server/table/version.service";
import { canonicalFilter } from "~shared/filter/address";
import type { ConstraintFilter } from "~shared/filter/filter";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import { takeProposal, type TakenDecision } from "~shared/table/decision";
import { proposeRows } from "~shared/table/proposeRows";

import type { PersonName } from "./people";
import { done, type Stage, type Step } from "./stage";

/** The fitting tables of the story: one saved as rows, two as recipes with every proposal taken. */
export function tableSteps(stage: Stage): Step[] {
  return [
    {
      at: new Date("2026-10-29T15:00:00Z"),
      tell: (at) =>
        rowTable(stage, at, "contributor", "Damping wings, 6 to 8", {
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
  ];
}

/** A fitting table with the rows that the program proposes. */
async function rowTable(
  stage: Stage,
  at: Date,
  owner: PersonName,
  name: string,
  filter: ConstraintFilter,
): Promise<void> {
  const who = stage.as(owner, at);
  const found = await findApproved(
    { database: { manager: stage.manager }, viewer: who.viewer },
    filter,
  );
  const rows = proposeRows(
    found.map(({ constraint, revision, citation }) => ({
      number: formatRecordNumber(constraint.id),
      fields: revision.fields,
      citation: citation.id,
      year: citation.year,
    })),
  );
  done(await saveTable(who, { name, filter, rows }), "table");
}

const MOST_ROUNDS = 60;

/** A fitting table whose every decision is its proposal, taken one after another. */
async function recipeTable(
  stage: Stage,
  at: Date,
  owner: PersonName,
  name: string,
  filter: ConstraintFilterInput,
): Promise<void> {
  const who = stage.as(owner, at);
  let decisions: TakenDecision[] = [];
  for (let round = 0; round < MOST_ROUNDS; round += 1) {
    const followed = await follow(stage.manager, who.viewer, {
      release: null,
      filter: canonicalFilter(filter),
      choices: { decisions, out: [], forms: [] },
    });
    if (followed instanceof Refusal) throw new Error(followed.message);
    // What a decision settles can raise others: again until none is open.
    const open = followed.settled.decisions.filter(({ taken }) => taken === null);
    if (open.length === 0) break;
    decisions = [...decisions, ...open.map(takeProposal)];
  }
  done(
    await saveRecipe(who, {
      name,
      visibility: "public",
      recipe: {
        filter,
        decisions: decisions.map(({ id, option }) => ({ id, option, byDefault: true })),
      },
    }),
    `table ${name}`,
  );
}
