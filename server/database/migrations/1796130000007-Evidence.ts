import type { MigrationInterface, QueryRunner } from "typeorm";

export class Evidence1796130000007 implements MigrationInterface {
  name = "Evidence1796130000007";

  public async up(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query(
      "CREATE TABLE `evidence_file` (`digest` char(64) NOT NULL, `kind` varchar(8) NOT NULL, `bytes` int UNSIGNED NOT NULL, PRIMARY KEY (`digest`)) ENGINE=InnoDB",
    );
    await queryRunner.query(
      "CREATE TABLE `evidence_chunk` (`digest` char(64) NOT NULL, `ordinal` int UNSIGNED NOT NULL, `data` mediumblob NOT NULL, PRIMARY KEY (`digest`, `ordinal`)) ENGINE=InnoDB",
    );
    await queryRunner.query(
      "CREATE TABLE `evidence` (`id` uuid NOT NULL, `revisionId` uuid NOT NULL, `digest` char(64) NOT NULL, `name` varchar(120) NOT NULL, `caption` varchar(300) NOT NULL, `uploadedById` uuid NOT NULL, `at` datetime(6) NOT NULL, INDEX `IDX_07dde44a0324caabd536175687` (`digest`), UNIQUE INDEX `one_file_once` (`revisionId`, `digest`), PRIMARY KEY (`id`)) ENGINE=InnoDB",
    );
    await queryRunner.query(
      "ALTER TABLE `evidence_chunk` ADD CONSTRAINT `FK_c4557e719b7c4ec34cd2dfcea9c` FOREIGN KEY (`digest`) REFERENCES `evidence_file`(`digest`) ON DELETE CASCADE ON UPDATE NO ACTION",
    );
    await queryRunner.query(
      "ALTER TABLE `evidence` ADD CONSTRAINT `FK_529cf1bb936dba70fed944e66a3` FOREIGN KEY (`revisionId`) REFERENCES `revision`(`id`) ON DELETE CASCADE ON UPDATE NO ACTION",
    );
    await queryRunner.query(
      "ALTER TABLE `evidence` ADD CONSTRAINT `FK_07dde44a0324caabd5361756876` FOREIGN KEY (`digest`) REFERENCES `evidence_file`(`digest`) ON DELETE RESTRICT ON UPDATE NO ACTION",
    );
    // The log is looked through by kind and by person.
    await queryRunner.query("CREATE INDEX `event_by_kind` ON `event` (`kind`)");
    await queryRunner.query("CREATE INDEX `event_by_actor` ON `event` (`actorId`)");
  }

  public async down(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query("DROP INDEX `event_by_actor` ON `event`");
    await queryRunner.query("DROP INDEX `event_by_kind` ON `event`");
    await queryRunner.query("DROP TABLE `evidence`");
    await queryRunner.query("DROP TABLE `evidence_chunk`");
    await queryRunner.query("DROP TABLE `evidence_file`");
  }
}
