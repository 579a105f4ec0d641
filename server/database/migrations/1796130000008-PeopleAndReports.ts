import type { MigrationInterface, QueryRunner } from "typeorm";

export class PeopleAndReports1796130000008 implements MigrationInterface {
  name = "PeopleAndReports1796130000008";

  public async up(queryRunner: QueryRunner): Promise<void> {
    // In three steps: a new column that may not be empty would fail on the rows that are there.
    await queryRunner.query("ALTER TABLE `user` ADD `furtherNames` json NULL");
    await queryRunner.query("UPDATE `user` SET `furtherNames` = '[]'");
    await queryRunner.query("ALTER TABLE `user` MODIFY `furtherNames` json NOT NULL");
    await queryRunner.query("ALTER TABLE `user` ADD `formerAt` datetime(6) NULL");
    await queryRunner.query("ALTER TABLE `mail_token` ADD `address` varchar(254) NULL");
    await queryRunner.query(
      "CREATE TABLE `error_report` (`id` uuid NOT NULL, `constraintId` int UNSIGNED NOT NULL, `revisionId` uuid NOT NULL, `text` text NOT NULL, `reporterId` uuid NULL, `reporterEmail` varchar(254) NULL, `state` varchar(12) NOT NULL, `outcome` varchar(24) NULL, `correctedBy` varchar(24) NULL, `version` int UNSIGNED NOT NULL DEFAULT '1', `createdAt` datetime(6) NOT NULL, `repliedAt` datetime(6) NULL, `closedAt` datetime(6) NULL, INDEX `report_of_record` (`constraintId`), INDEX `report_by_state` (`state`, `createdAt`), PRIMARY KEY (`id`)) ENGINE=InnoDB",
    );
    await queryRunner.query(
      "CREATE TABLE `error_report_message` (`id` int UNSIGNED NOT NULL AUTO_INCREMENT, `reportId` uuid NOT NULL, `byId` uuid NULL, `text` text NOT NULL, `at` datetime(6) NOT NULL, INDEX `message_of_report` (`reportId`), PRIMARY KEY (`id`)) ENGINE=InnoDB",
    );
    await queryRunner.query(
      "ALTER TABLE `error_report` ADD CONSTRAINT `FK_8d6fbdaa4f08423cec5ded04a64` FOREIGN KEY (`constraintId`) REFERENCES `constraint_record`(`id`) ON DELETE CASCADE ON UPDATE NO ACTION",
    );
    await queryRunner.query(
      "ALTER TABLE `error_report` ADD CONSTRAINT `FK_8190f2a402da48ab0f977f851ea` FOREIGN KEY (`revisionId`) REFERENCES `revision`(`id`) ON DELETE CASCADE ON UPDATE NO ACTION",
    );
    await queryRunner.query(
      "ALTER TABLE `error_report_message` ADD CONSTRAINT `FK_d71e39a43830f9eaa65aa6a03cf` FOREIGN KEY (`reportId`) REFERENCES `error_report`(`id`) ON DELETE CASCADE ON UPDATE NO ACTION",
    );
  }

  public async down(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query("DROP TABLE `error_report_message`");
    await queryRunner.query("DROP TABLE `error_report`");
    await queryRunner.query("ALTER TABLE `mail_token` DROP COLUMN `address`");
    await queryRunner.query("ALTER TABLE `user` DROP COLUMN `formerAt`");
    await queryRunner.query("ALTER TABLE `user` DROP COLUMN `furtherNames`");
  }
}
