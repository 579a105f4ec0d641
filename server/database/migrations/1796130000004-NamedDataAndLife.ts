import type { MigrationInterface, QueryRunner } from "typeorm";

import { dataSlug } from "~shared/dependence/namedData";

const RELATIONS = ["supersedes", "erratumOf", "reanalysisOf", "subsetOf", "conditionedOn"] as const;
const KINDS = ["cmb", "lymanAlpha", "luminosityFunction", "twentyOneCm"];

export class NamedDataAndLife1796130000004 implements MigrationInterface {
  name = "NamedDataAndLife1796130000004";

  public async up(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query(
      `CREATE TABLE \`revision_link\` (\`id\` int UNSIGNED NOT NULL AUTO_INCREMENT, \`revisionId\` uuid NOT NULL, \`relation\` varchar(16) NOT NULL, \`targetId\` int UNSIGNED NULL, \`kind\` varchar(24) NULL, INDEX \`links_of_revision\` (\`revisionId\`), INDEX \`links_to\` (\`targetId\`, \`relation\`), PRIMARY KEY (\`id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`relation_gate\` (\`id\` int NOT NULL, \`passes\` bigint UNSIGNED NOT NULL, PRIMARY KEY (\`id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`named_data\` (\`id\` int UNSIGNED NOT NULL AUTO_INCREMENT, \`slug\` varchar(90) CHARACTER SET "ascii" COLLATE "ascii_bin" NOT NULL, \`name\` varchar(300) NOT NULL, \`kind\` varchar(12) NOT NULL DEFAULT 'unknown', \`ra\` varchar(24) NULL, \`dec\` varchar(24) NULL, \`extent\` varchar(300) NULL, \`note\` text NULL, \`mergedIntoId\` int UNSIGNED NULL, \`version\` int UNSIGNED NOT NULL DEFAULT '1', \`createdAt\` datetime(6) NOT NULL DEFAULT CURRENT_TIMESTAMP(6), UNIQUE INDEX \`data_slug\` (\`slug\`), PRIMARY KEY (\`id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`named_data_alias\` (\`id\` int UNSIGNED NOT NULL AUTO_INCREMENT, \`dataId\` int UNSIGNED NOT NULL, \`name\` varchar(300) NOT NULL, \`comparable\` varchar(200) NOT NULL, INDEX \`aliases_of_data\` (\`dataId\`), UNIQUE INDEX \`one_spelling\` (\`comparable\`), PRIMARY KEY (\`id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`named_data_relation\` (\`id\` int UNSIGNED NOT NULL AUTO_INCREMENT, \`fromId\` int UNSIGNED NOT NULL, \`relation\` varchar(12) NOT NULL, \`toId\` int UNSIGNED NOT NULL, INDEX \`data_related_to\` (\`toId\`), UNIQUE INDEX \`one_data_relation\` (\`fromId\`, \`toId\`), PRIMARY KEY (\`id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`record_notice\` (\`id\` int UNSIGNED NOT NULL AUTO_INCREMENT, \`constraintId\` int UNSIGNED NOT NULL, \`kind\` varchar(12) NOT NULL, \`reason\` text NOT NULL, \`replacedById\` int UNSIGNED NULL, \`revisionId\` uuid NULL, \`byId\` uuid NOT NULL, \`at\` datetime(6) NOT NULL, \`endedAt\` datetime(6) NULL, \`endedById\` uuid NULL, \`endedReason\` text NULL, INDEX \`replaced_by\` (\`replacedById\`), INDEX \`notices_of_record\` (\`constraintId\`, \`endedAt\`), PRIMARY KEY (\`id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `ALTER TABLE \`revision_link\` ADD CONSTRAINT \`FK_1396c955129fda7fd8393cbc299\` FOREIGN KEY (\`revisionId\`) REFERENCES \`revision\`(\`id\`) ON DELETE CASCADE ON UPDATE NO ACTION`,
    );
    await queryRunner.query(
      `ALTER TABLE \`named_data_alias\` ADD CONSTRAINT \`FK_1418c4b2230eb13142bb705c681\` FOREIGN KEY (\`dataId\`) REFERENCES \`named_data\`(\`id\`) ON DELETE CASCADE ON UPDATE NO ACTION`,
    );
    await queryRunner.query(
      `ALTER TABLE \`named_data_relation\` ADD CONSTRAINT \`FK_b84a3a4e0c425bcdc59d51b3507\` FOREIGN KEY (\`fromId\`) REFERENCES \`named_data\`(\`id\`) ON DELETE CASCADE ON UPDATE NO ACTION`,
    );
    await queryRunner.query(
      `ALTER TABLE \`named_data_relation\` ADD CONSTRAINT \`FK_5179a4acce6fa74375ba0b546a3\` FOREIGN KEY (\`toId\`) REFERENCES \`named_data\`(\`id\`) ON DELETE CASCADE ON UPDATE NO ACTION`,
    );
    await queryRunner.query(
      `ALTER TABLE \`record_notice\` ADD CONSTRAINT \`FK_78129095f50c390e3940b8150da\` FOREIGN KEY (\`constraintId\`) REFERENCES \`constraint_record\`(\`id\`) ON DELETE CASCADE ON UPDATE NO ACTION`,
    );
    await linkWhatIsThere(queryRunner);
    await nameWhatIsThere(queryRunner);
  }

  public async down(queryRunner: QueryRunner): Promise<void> {
    for (const table of [
      "record_notice",
      "named_data_relation",
      "named_data_alias",
      "named_data",
      "relation_gate",
      "revision_link",
    ]) {
      await queryRunner.query(`DROP TABLE \`${table}\``);
    }
  }
}

/** Links of revisions that were submitted before links had a table. */
async function linkWhatIsThere(queryRunner: QueryRunner): Promise<void> {
  const revisions: { id: string; fields: unknown }[] = await queryRunner.query(
    "SELECT id, fields FROM revision WHERE state <> 'draft' AND state <> 'discarded'",
  );
  const records: { id: number }[] = await queryRunner.query("SELECT id FROM constraint_record");
  const known = new Set(records.map(({ id }) => Number(id)));
  for (const { id, fields } of revisions) {
    const content = (typeof fields === "string" ? JSON.parse(fields) : fields) as Record<
      string,
      unknown
    >;
    for (const relation of RELATIONS) {
      const named = content[relation];
      for (const word of Array.isArray(named) ? named.map(String) : []) {
        const digits = /^\s*fl-?0*([1-9]\d{0,8})(?:\.\d{1,6})?\s*$/i.exec(word)?.[1];
        const target = digits !== undefined && known.has(Number(digits)) ? Number(digits) : null;
        const kind = relation === "conditionedOn" && KINDS.includes(word) ? word : null;
        if (target === null && kind === null) continue;
        await queryRunner.query(
          "INSERT INTO revision_link (revisionId, relation, targetId, kind) VALUES (?, ?, ?, ?)",
          [id, relation, target, kind],
        );
      }
    }
  }
}

/** Sightlines, fields and samples that approved revisions name. */
async function nameWhatIsThere(queryRunner: QueryRunner): Promise<void> {
  const names: { comparable: string; name: string }[] = await queryRunner.query(
    `SELECT data.comparable, MIN(data.name) AS name FROM revision_data data
       JOIN constraint_record record ON record.approvedRevisionId = data.revisionId
      GROUP BY data.comparable ORDER BY MIN(data.id)`,
  );
  const taken = new Set<string>();
  for (const { comparable, name } of names) {
    let slug = dataSlug(name);
    for (let count = 2; taken.has(slug); count += 1) slug = `${dataSlug(name)}-${count}`;
    taken.add(slug);
    const { insertId }: { insertId: number } = await queryRunner.query(
      "INSERT INTO named_data (slug, name) VALUES (?, ?)",
      [slug, name],
    );
    await queryRunner.query(
      "INSERT INTO named_data_alias (dataId, name, comparable) VALUES (?, ?, ?)",
      [insertId, name, comparable],
    );
  }
}
