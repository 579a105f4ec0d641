import type { DataSource } from "typeorm";

import type { User } from "~server/account/user.entity";
import type { ConstraintFilterInput } from "~server/constraint/constraint.type";
import { takenProposals } from "~server/seed/tables";
import type { Visibility } from "~server/table/table.entity";
import type { TableVersion } from "~server/table/tableVersion.entity";
import { saveRecipe } from "~server/table/version.service";
import { canonicalFilter } from "~shared/filter/address";

import { actingAs, granted } from "./constraint";

/** A fitting table with every proposal taken, and with rows taken out by hand. */
export async function buildTable(
  database: DataSource,
  owner: User,
  given: {
    name?: string;
    filter: ConstraintFilterInput;
    out?: { number: string; reason: string }[];
    release?: number | null;
    visibility?: Visibility;
    notify?: boolean;
  },
): Promise<TableVersion> {
  const who = actingAs(database, owner);
  const { name = "Table", filter, out = [], visibility = "public", notify = false } = given;
  const { release = null } = given;
  const recipe = { release, filter: canonicalFilter(filter), out };
  const decisions = await takenProposals(database.manager, who.viewer, recipe);
  return granted(
    await saveRecipe(who, {
      name,
      visibility,
      notify,
      recipe: {
        filter,
        release,
        out,
        decisions: decisions.map(({ id, option }) => ({ id, option, byDefault: true })),
      },
    }),
  );
}
