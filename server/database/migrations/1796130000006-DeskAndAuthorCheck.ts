import type { MigrationInterface, QueryRunner } from "typeorm";

export class DeskAndAuthorCheck1796130000006 implements MigrationInterface {
  name = "DeskAndAuthorCheck1796130000006";

  public async up(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query(
      "ALTER TABLE `revision` ADD `claimRenewals` tinyint UNSIGNED NOT NULL DEFAULT '0'",
    );
    // In three steps: a new column that may not be empty would fail on the rows that are there.
    await queryRunner.query("ALTER TABLE `reading` ADD `ticked` json NULL");
    await queryRunner.query("UPDATE `reading` SET `ticked` = '[]'");
    await queryRunner.query("ALTER TABLE `reading` MODIFY `ticked` json NOT NULL");
    await queryRunner.query(
      "CREATE TABLE `recusal` (`id` uuid NOT NULL, `citationId` uuid NOT NULL, `editorId` uuid NOT NULL, `reason` varchar(500) NULL, `at` datetime(6) NOT NULL, INDEX `recusals_of_editor` (`editorId`), UNIQUE INDEX `one_recusal` (`citationId`, `editorId`), PRIMARY KEY (`id`)) ENGINE=InnoDB",
    );
    await queryRunner.query(
      "CREATE TABLE `comment_message` (`id` int UNSIGNED NOT NULL AUTO_INCREMENT, `commentId` uuid NOT NULL, `byId` uuid NOT NULL, `text` text NOT NULL, `at` datetime(6) NOT NULL, INDEX `messages_of_comment` (`commentId`), PRIMARY KEY (`id`)) ENGINE=InnoDB",
    );
    await queryRunner.query(
      "CREATE TABLE `author_check` (`id` uuid NOT NULL, `constraintId` int UNSIGNED NOT NULL, `revisionId` uuid NOT NULL, `tokenHash` char(64) CHARACTER SET ascii COLLATE ascii_bin NOT NULL, `authorName` varchar(120) NULL, `authorEmail` varchar(254) NULL, `state` varchar(12) NOT NULL, `verdict` varchar(12) NULL, `version` int UNSIGNED NOT NULL DEFAULT '1', `sentById` uuid NOT NULL, `sentAt` datetime(6) NOT NULL, `expiresAt` datetime(6) NOT NULL, `answeredAt` datetime(6) NULL, `endedById` uuid NULL, `endedAt` datetime(6) NULL, INDEX `checks_of_record` (`constraintId`), UNIQUE INDEX `check_token` (`tokenHash`), INDEX `check_by_state` (`state`, `sentAt`), PRIMARY KEY (`id`)) ENGINE=InnoDB",
    );
    await queryRunner.query(
      "CREATE TABLE `author_check_entry` (`id` int UNSIGNED NOT NULL AUTO_INCREMENT, `checkId` uuid NOT NULL, `byId` uuid NULL, `verdict` varchar(12) NULL, `text` text NULL, `at` datetime(6) NOT NULL, INDEX `entries_of_check` (`checkId`), PRIMARY KEY (`id`)) ENGINE=InnoDB",
    );
    await queryRunner.query(
      "ALTER TABLE `author_check` ADD CONSTRAINT `FK_08bb35c05a53672da439d214499` FOREIGN KEY (`constraintId`) REFERENCES `constraint_record`(`id`) ON DELETE CASCADE ON UPDATE NO ACTION",
    );
    await queryRunner.query(
      "ALTER TABLE `author_check` ADD CONSTRAINT `FK_79d7d1dc1d67f3fc9153d485394` FOREIGN KEY (`revisionId`) REFERENCES `revision`(`id`) ON DELETE CASCADE ON UPDATE NO ACTION",
    );
    await queryRunner.query(
      "ALTER TABLE `author_check_entry` ADD CONSTRAINT `FK_2912ff438c7e20561e75ea2df79` FOREIGN KEY (`checkId`) REFERENCES `author_check`(`id`) ON DELETE CASCADE ON UPDATE NO ACTION",
    );
    await queryRunner.query(
      "ALTER TABLE `comment_message` ADD CONSTRAINT `FK_4ba8466ae9b58450dc1fe06ff77` FOREIGN KEY (`commentId`) REFERENCES `field_comment`(`id`) ON DELETE CASCADE ON UPDATE NO ACTION",
    );
    await queryRunner.query(
      "ALTER TABLE `recusal` ADD CONSTRAINT `FK_811638223a64684f3511b3ebd7f` FOREIGN KEY (`citationId`) REFERENCES `citation`(`id`) ON DELETE CASCADE ON UPDATE NO ACTION",
    );
  }

  public async down(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query("DROP TABLE `author_check_entry`");
    await queryRunner.query("DROP TABLE `author_check`");
    await queryRunner.query("DROP TABLE `comment_message`");
    await queryRunner.query("DROP TABLE `recusal`");
    await queryRunner.query("ALTER TABLE `reading` DROP COLUMN `ticked`");
    await queryRunner.query("ALTER TABLE `revision` DROP COLUMN `claimRenewals`");
  }
}
