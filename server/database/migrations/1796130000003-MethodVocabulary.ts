import type { MigrationInterface, QueryRunner } from "typeorm";

export class MethodVocabulary1796130000003 implements MigrationInterface {
  name = "MethodVocabulary1796130000003";

  public async up(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query(
      'CREATE TABLE `method_tag` (`tag` varchar(40) CHARACTER SET "ascii" COLLATE "ascii_bin" NOT NULL, `family` varchar(24) NOT NULL, `name` varchar(60) NOT NULL, `definition` varchar(200) NOT NULL, `caution` varchar(200) NOT NULL, `aliases` json NOT NULL, `neverIndependent` tinyint NOT NULL DEFAULT 0, `position` int UNSIGNED NOT NULL, `retiredInto` varchar(40) CHARACTER SET "ascii" COLLATE "ascii_bin" NULL, `version` int UNSIGNED NOT NULL DEFAULT \'1\', PRIMARY KEY (`tag`)) ENGINE=InnoDB',
    );
  }

  public async down(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query("DROP TABLE `method_tag`");
  }
}
