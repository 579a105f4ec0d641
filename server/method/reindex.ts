import type { EntityManager } from "typeorm";

import { escapeLike } from "~server/constraint/constraint.query";
import { methodColumns } from "~server/constraint/revision.index";
import { withVocabulary } from "~shared/methods/vocabulary";
import type { ConstraintFields } from "~shared/statement/fields";

import { keptMethods } from "./vocabulary";

const PAGE = 500;
/** Below every id; an empty text is none to compare an id with. */
const LOWEST = "00000000-0000-0000-0000-000000000000";

/**
 * Rewrites by what revisions with a method are found, after it was retired or moved to another family. What
 * the revisions say stays as it is.
 *
 * @param tag - The method as it stood in the index columns until now.
 */
export async function reindexMethod(manager: EntityManager, tag: string): Promise<void> {
  const vocabulary = await keptMethods(manager);
  for (let after = LOWEST; ;) {
    const page: { id: string; fields: string | ConstraintFields }[] = await manager.query(
      `SELECT id, fields FROM revision
        WHERE tags LIKE ? ESCAPE '!' AND id > ? ORDER BY id LIMIT ${PAGE}`,
      [`%,${escapeLike(tag)},%`, after],
    );
    for (const { id, fields } of page) {
      // The driver reads JSON columns by itself, where the server says that one is JSON.
      const { methodTags } =
        typeof fields === "string" ? (JSON.parse(fields) as ConstraintFields) : fields;
      const columns = withVocabulary(vocabulary, () => methodColumns(methodTags));
      await manager.query("UPDATE revision SET families = ?, tags = ? WHERE id = ?", [
        columns.families,
        columns.tags,
        id,
      ]);
    }
    const last = page.at(-1);
    if (!last || page.length < PAGE) return;
    after = last.id;
  }
}
