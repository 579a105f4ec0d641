import type { MigrationInterface, QueryRunner } from "typeorm";

/**
 * A version keeps the name and the address that its files say. Every table has versions. One saved as mere rows, as the first development states could, has none to show:
 * its address answers that it is gone. No released state ever made one.
 */
export class TablesByVersionOnly1796130000038 implements MigrationInterface {
  name = "TablesByVersionOnly1796130000038";

  public async up(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query(
      `UPDATE \`fitting_table\` SET \`deletedAt\` = CURRENT_TIMESTAMP(6) WHERE \`version\` = 0 AND \`deletedAt\` IS NULL`,
    );
    await queryRunner.query(`ALTER TABLE \`fitting_table\` DROP COLUMN \`snapshot\``);
    await queryRunner.query(
      `ALTER TABLE \`fitting_table_version\` ADD \`name\` varchar(120) NOT NULL, ADD \`address\` varchar(500) NOT NULL`,
    );
    // The address stands in the lines at the head of every file, behind the demonstration's words.
    await queryRunner.query(
      `UPDATE \`fitting_table_version\` version JOIN \`fitting_table\` saved ON saved.slug = version.slug
          SET version.\`name\` = saved.\`name\`,
              version.\`address\` = SUBSTRING(JSON_VALUE(version.\`lines\`, CONCAT('$[', version.\`demonstration\`, ']')), 10)`,
    );
  }

  public async down(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query(
      `ALTER TABLE \`fitting_table_version\` DROP COLUMN \`address\`, DROP COLUMN \`name\``,
    );
    await queryRunner.query(`ALTER TABLE \`fitting_table\` ADD \`snapshot\` json NULL`);
  }
}
