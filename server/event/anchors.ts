import type { EntityManager } from "typeorm";

/** An event whose digest is known outside the chain, so that a chain made anew shows. */
export interface Anchor {
  /** Who knows it, as a sentence names it: "the backup in /srv/backups/2031-02-03". */
  source: string;
  sequence: number;
  digest: string;
}

/** How a sentence names what keeps a head; a table that isn't named here speaks for itself. */
const SOURCES: Readonly<Record<string, { words: string; name: string; where?: string }>> = {
  fitting_table: { words: "the fitting table", name: "slug" },
  fitting_table_version: {
    words: "the fitting table",
    name: "CONCAT(slug, ', version ', version)",
  },
  registry_release: { words: "release", name: "number" },
};

/**
 * Every head of the log that the registry itself keeps beside the chain: releases and fitting
 * tables. Whatever has the columns lastEventSequence and lastEventDigest is found by them, so a
 * new kind of snapshot takes part without being told.
 */
export async function anchorsInside(manager: EntityManager): Promise<Anchor[]> {
  const tables: { name: string }[] = await manager.query(
    `SELECT table_name AS name FROM information_schema.columns
      WHERE table_schema = DATABASE() AND column_name IN ('lastEventSequence', 'lastEventDigest')
      GROUP BY table_name HAVING COUNT(*) = 2 ORDER BY table_name`,
  );
  const anchors: Anchor[] = [];
  for (const { name } of tables) {
    const { words, name: label } = SOURCES[name] ?? { words: `a row of ${name}`, name: "''" };
    const rows: { label: string; sequence: number; digest: string }[] = await manager.query(
      `SELECT ${label} AS label, lastEventSequence AS sequence, lastEventDigest AS digest
         FROM \`${name}\` WHERE lastEventSequence > 0 ORDER BY lastEventSequence`,
    );
    for (const row of rows) {
      anchors.push({
        source: `${words} ${row.label}`.trim(),
        sequence: Number(row.sequence),
        digest: row.digest,
      });
    }
  }
  return anchors;
}
