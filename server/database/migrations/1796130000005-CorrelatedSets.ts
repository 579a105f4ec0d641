import type { MigrationInterface, QueryRunner } from "typeorm";

export class CorrelatedSets1796130000005 implements MigrationInterface {
  name = "CorrelatedSets1796130000005";

  public async up(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query(
      "CREATE TABLE `correlated_set` (`id` int UNSIGNED NOT NULL AUTO_INCREMENT, `chainId` int UNSIGNED NOT NULL, `followsId` int UNSIGNED NULL, `ownerId` uuid NOT NULL, `citationId` uuid NOT NULL, `state` varchar(20) NOT NULL, `version` int UNSIGNED NOT NULL DEFAULT '1', `label` varchar(120) NULL, `members` json NOT NULL, `matrixKind` varchar(20) NULL, `triangle` json NOT NULL, `place` text NULL, `page` varchar(120) NULL, `note` text NULL, `answers` json NOT NULL, `findings` json NOT NULL, `createdAt` datetime(6) NOT NULL, `updatedAt` datetime(6) NOT NULL, `submittedAt` datetime(6) NULL, `licence` varchar(120) NULL, `claimedById` uuid NULL, `claimedUntil` datetime(6) NULL, `decidedById` uuid NULL, `decidedAt` datetime(6) NULL, `decisionNote` text NULL, `memberRevisions` json NOT NULL, `withdrawnAt` datetime(6) NULL, `withdrawnBecause` text NULL, INDEX `set_of_chain` (`chainId`), INDEX `set_of_owner` (`ownerId`), INDEX `set_by_state` (`state`), PRIMARY KEY (`id`)) ENGINE=InnoDB",
    );
    await queryRunner.query(
      "CREATE TABLE `set_reading` (`id` uuid NOT NULL, `setId` int UNSIGNED NOT NULL, `editorId` uuid NOT NULL, `storedAt` datetime(6) NOT NULL, `first` json NOT NULL, `latest` json NOT NULL, `corrections` json NOT NULL, UNIQUE INDEX `one_set_reading` (`setId`, `editorId`), PRIMARY KEY (`id`)) ENGINE=InnoDB",
    );
    await queryRunner.query(
      "ALTER TABLE `correlated_set` ADD CONSTRAINT `FK_57ccba705f9b2d13c1c2f0c7778` FOREIGN KEY (`ownerId`) REFERENCES `user`(`id`) ON DELETE RESTRICT ON UPDATE NO ACTION",
    );
    await queryRunner.query(
      "ALTER TABLE `correlated_set` ADD CONSTRAINT `FK_352199da20573ab481e51491a0f` FOREIGN KEY (`citationId`) REFERENCES `citation`(`id`) ON DELETE RESTRICT ON UPDATE NO ACTION",
    );
    await queryRunner.query(
      "ALTER TABLE `set_reading` ADD CONSTRAINT `FK_58692df27c88f5e252f055e316e` FOREIGN KEY (`setId`) REFERENCES `correlated_set`(`id`) ON DELETE CASCADE ON UPDATE NO ACTION",
    );
  }

  public async down(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query("DROP TABLE `set_reading`");
    await queryRunner.query("DROP TABLE `correlated_set`");
  }
}
