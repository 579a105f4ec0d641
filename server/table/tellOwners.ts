import { IsNull } from "typeorm";

import { change, type Acting } from "~server/event/acting";
import type { Release } from "~server/release/release.entity";

import { tableChanges } from "./changes.service";
import { SavedTable } from "./table.entity";

/**
 * Tells the owner of each table who asked for it that a release would change the table: one mail for each
 * table and release, none for a table that stays as it is. It runs behind the release's own transaction,
 * since comparing takes a while; a table that was told of a release is not told of it again.
 *
 * The comparison sees what the public sees, and the mail names records by their numbers only.
 */
export async function tellOwners(who: Acting, release: Release): Promise<number> {
  const tables = await who.database.manager.find(SavedTable, {
    where: { notify: true, deletedAt: IsNull() },
    relations: { owner: true },
    order: { slug: "ASC" },
  });
  let told = 0;
  for (const table of tables) {
    if (table.toldOfRelease >= release.number) continue;
    const changes = await tableChanges(who.database.manager, null, table);
    const numbers = changes?.rows.map(({ number }) => number) ?? [];
    const open = changes?.open ?? 0;
    told += await change(who, async ({ manager, mail }) => {
      const { affected } = await manager
        .createQueryBuilder()
        .update(SavedTable)
        .set({ toldOfRelease: release.number })
        .where("slug = :slug AND toldOfRelease < :number", {
          slug: table.slug,
          number: release.number,
        })
        .execute();
      if (affected !== 1 || (numbers.length === 0 && open === 0)) return 0;
      await mail({
        to: table.owner.email,
        subject: `Release ${release.number} would change ${table.name}`,
        text: `${[
          `Dear ${table.owner.nameOnPapers},`,
          `Release ${release.number} is out. Your fitting table “${table.name}” stays as it is; over the newer records it would change:`,
          ...(numbers.length > 0 ? [`Rows: ${numbers.join(", ")}`] : []),
          ...(open > 0
            ? [open === 1 ? "One decision would be open." : `${open} decisions would be open.`]
            : []),
          `${who.publicUrl}/tables/${table.slug}`,
          "You asked for this mail when you saved the table; its page lets you end it.",
          "Fogline",
        ].join("\n\n")}\n`,
      });
      return 1;
    });
  }
  return told;
}
