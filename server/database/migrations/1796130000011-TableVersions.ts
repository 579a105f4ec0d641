import type { MigrationInterface, QueryRunner } from "typeorm";

interface Snapshot {
  rows: { included: boolean }[];
  filterWords: string;
}

export class TableVersions1796130000011 implements MigrationInterface {
  name = "TableVersions1796130000011";

  public async up(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query(
      `CREATE TABLE \`fitting_table_version\` (\`slug\` varchar(24) NOT NULL, \`version\` int UNSIGNED NOT NULL, \`createdAt\` datetime(6) NOT NULL, \`releaseNumber\` int UNSIGNED NULL, \`recipe\` json NOT NULL, \`filterWords\` varchar(2000) NOT NULL, \`digest\` char(64) NOT NULL, \`rowsIn\` int UNSIGNED NOT NULL, \`rowsOut\` int UNSIGNED NOT NULL, \`lastEventSequence\` int UNSIGNED NOT NULL, \`lastEventDigest\` char(64) NOT NULL, \`lastEventAt\` datetime(6) NOT NULL, \`licence\` varchar(120) NOT NULL, \`demonstration\` tinyint NOT NULL, \`decisions\` json NOT NULL, \`mixtures\` json NOT NULL, \`sets\` json NOT NULL, \`lines\` json NOT NULL, \`cautions\` json NOT NULL, \`columns\` json NOT NULL, \`methods\` mediumtext NOT NULL, \`figure\` mediumtext NOT NULL, PRIMARY KEY (\`slug\`, \`version\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`fitting_table_row\` (\`slug\` varchar(24) NOT NULL, \`version\` int UNSIGNED NOT NULL, \`position\` int UNSIGNED NOT NULL, \`constraintId\` int UNSIGNED NOT NULL, \`included\` tinyint NOT NULL, \`citationKey\` varchar(80) CHARACTER SET "ascii" COLLATE "ascii_bin" NOT NULL, \`content\` mediumtext NOT NULL, \`cells\` json NULL, \`latex\` text NULL, \`paper\` mediumtext NOT NULL, \`record\` mediumtext NOT NULL, INDEX \`IDX_f5a484bf049a7f992805bec538\` (\`constraintId\`), INDEX \`rows_by_paper\` (\`slug\`, \`version\`, \`citationKey\`), PRIMARY KEY (\`slug\`, \`version\`, \`position\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `ALTER TABLE \`fitting_table\` ADD \`visibility\` varchar(10) NOT NULL DEFAULT 'public'`,
    );
    await queryRunner.query(
      `ALTER TABLE \`fitting_table\` ADD \`version\` int UNSIGNED NOT NULL DEFAULT '0'`,
    );
    await queryRunner.query(`ALTER TABLE \`fitting_table\` ADD \`adaptedFrom\` varchar(24) NULL`);
    await queryRunner.query(
      `ALTER TABLE \`fitting_table\` ADD \`notify\` tinyint NOT NULL DEFAULT 0`,
    );
    await queryRunner.query(
      `ALTER TABLE \`fitting_table\` ADD \`rowsIn\` int UNSIGNED NOT NULL DEFAULT '0'`,
    );
    await queryRunner.query(
      `ALTER TABLE \`fitting_table\` ADD \`rowsOut\` int UNSIGNED NOT NULL DEFAULT '0'`,
    );
    await queryRunner.query(
      `ALTER TABLE \`fitting_table\` ADD \`filterWords\` varchar(2000) NOT NULL DEFAULT ''`,
    );
    await queryRunner.query(
      `ALTER TABLE \`fitting_table\` ADD \`releaseNumber\` int UNSIGNED NULL`,
    );
    await queryRunner.query(`ALTER TABLE \`fitting_table\` MODIFY \`snapshot\` json NULL`);
    await queryRunner.query(
      `ALTER TABLE \`fitting_table_version\` ADD CONSTRAINT \`FK_c4846453ac1027c6426e6e1dec4\` FOREIGN KEY (\`slug\`) REFERENCES \`fitting_table\`(\`slug\`) ON DELETE RESTRICT ON UPDATE NO ACTION`,
    );
    await this.fillFacts(queryRunner);
  }

  /** What lists of tables show, out of the content of those saved before. */
  private async fillFacts(queryRunner: QueryRunner): Promise<void> {
    const saved: { slug: string; snapshot: string | Snapshot }[] = await queryRunner.query(
      "SELECT slug, snapshot FROM fitting_table WHERE snapshot IS NOT NULL",
    );
    for (const { slug, snapshot } of saved) {
      const { rows, filterWords } =
        typeof snapshot === "string" ? (JSON.parse(snapshot) as Snapshot) : snapshot;
      const rowsIn = rows.filter(({ included }) => included).length;
      await queryRunner.query(
        "UPDATE fitting_table SET rowsIn = ?, rowsOut = ?, filterWords = ? WHERE slug = ?",
        [rowsIn, rows.length - rowsIn, filterWords.slice(0, 2000), slug],
      );
    }
  }

  public async down(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query(
      `ALTER TABLE \`fitting_table_version\` DROP FOREIGN KEY \`FK_c4846453ac1027c6426e6e1dec4\``,
    );
    await queryRunner.query(`ALTER TABLE \`fitting_table\` MODIFY \`snapshot\` json NOT NULL`);
    await queryRunner.query(`ALTER TABLE \`fitting_table\` DROP COLUMN \`releaseNumber\``);
    await queryRunner.query(`ALTER TABLE \`fitting_table\` DROP COLUMN \`filterWords\``);
    await queryRunner.query(`ALTER TABLE \`fitting_table\` DROP COLUMN \`rowsOut\``);
    await queryRunner.query(`ALTER TABLE \`fitting_table\` DROP COLUMN \`rowsIn\``);
    await queryRunner.query(`ALTER TABLE \`fitting_table\` DROP COLUMN \`notify\``);
    await queryRunner.query(`ALTER TABLE \`fitting_table\` DROP COLUMN \`adaptedFrom\``);
    await queryRunner.query(`ALTER TABLE \`fitting_table\` DROP COLUMN \`version\``);
    await queryRunner.query(`ALTER TABLE \`fitting_table\` DROP COLUMN \`visibility\``);
    await queryRunner.query(`DROP INDEX \`rows_by_paper\` ON \`fitting_table_row\``);
    await queryRunner.query(
      `DROP INDEX \`IDX_f5a484bf049a7f992805bec538\` ON \`fitting_table_row\``,
    );
    await queryRunner.query(`DROP TABLE \`fitting_table_row\``);
    await queryRunner.query(`DROP TABLE \`fitting_table_version\``);
  }
}
