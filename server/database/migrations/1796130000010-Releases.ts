import type { MigrationInterface, QueryRunner } from "typeorm";

export class Releases1796130000010 implements MigrationInterface {
  name = "Releases1796130000010";

  public async up(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query(
      `CREATE TABLE \`registry_release\` (\`number\` int UNSIGNED NOT NULL, \`cutAt\` datetime(6) NOT NULL, \`cutById\` uuid NOT NULL, \`notes\` text NOT NULL, \`digest\` char(64) NOT NULL, \`records\` int UNSIGNED NOT NULL, \`licence\` varchar(120) NOT NULL, \`demonstration\` tinyint NOT NULL, \`surroundings\` mediumtext NOT NULL, \`lastEventSequence\` int UNSIGNED NOT NULL, \`lastEventDigest\` char(64) NOT NULL, \`lastEventAt\` datetime(6) NOT NULL, PRIMARY KEY (\`number\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`registry_release_row\` (\`releaseNumber\` int UNSIGNED NOT NULL, \`constraintId\` int UNSIGNED NOT NULL, \`ordinal\` int UNSIGNED NOT NULL, \`digest\` char(64) NOT NULL, \`content\` mediumtext NOT NULL, INDEX \`IDX_434e66bc607412e56aa48d7be9\` (\`constraintId\`), PRIMARY KEY (\`releaseNumber\`, \`constraintId\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `ALTER TABLE \`registry_release\` ADD CONSTRAINT \`FK_b5aec7f28aaddf64316dcc8c7fb\` FOREIGN KEY (\`cutById\`) REFERENCES \`user\`(\`id\`) ON DELETE RESTRICT ON UPDATE NO ACTION`,
    );
    await queryRunner.query(
      `ALTER TABLE \`registry_release_row\` ADD CONSTRAINT \`FK_347622bd9704f3b5816cee5be0d\` FOREIGN KEY (\`releaseNumber\`) REFERENCES \`registry_release\`(\`number\`) ON DELETE RESTRICT ON UPDATE NO ACTION`,
    );
  }

  public async down(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query(
      `ALTER TABLE \`registry_release_row\` DROP FOREIGN KEY \`FK_347622bd9704f3b5816cee5be0d\``,
    );
    await queryRunner.query(
      `ALTER TABLE \`registry_release\` DROP FOREIGN KEY \`FK_b5aec7f28aaddf64316dcc8c7fb\``,
    );
    await queryRunner.query(
      `DROP INDEX \`IDX_434e66bc607412e56aa48d7be9\` ON \`registry_release_row\``,
    );
    await queryRunner.query(`DROP TABLE \`registry_release_row\``);
    await queryRunner.query(`DROP TABLE \`registry_release\``);
  }
}
