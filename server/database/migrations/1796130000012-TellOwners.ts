import type { MigrationInterface, QueryRunner } from "typeorm";

export class TellOwners1796130000012 implements MigrationInterface {
  name = "TellOwners1796130000012";

  public async up(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query(
      `ALTER TABLE \`fitting_table\` ADD \`toldOfRelease\` int UNSIGNED NOT NULL DEFAULT '0'`,
    );
  }

  public async down(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query(`ALTER TABLE \`fitting_table\` DROP COLUMN \`toldOfRelease\``);
  }
}
