import type { MigrationInterface, QueryRunner } from "typeorm";

export class Schema1796111633401 implements MigrationInterface {
  name = "Schema1796111633401";

  public async up(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query(
      `CREATE TABLE \`role_grant\` (\`userId\` uuid NOT NULL, \`role\` varchar(16) NOT NULL, \`grantedById\` uuid NULL, \`grantedAt\` datetime(6) NOT NULL DEFAULT CURRENT_TIMESTAMP(6), PRIMARY KEY (\`userId\`, \`role\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`user\` (\`id\` uuid NOT NULL, \`email\` varchar(254) CHARACTER SET "utf8mb4" COLLATE "utf8mb4_bin" NOT NULL, \`nameOnPapers\` varchar(120) NOT NULL, \`orcid\` varchar(19) NULL, \`passwordHash\` varchar(255) NOT NULL, \`sessionEpoch\` int NOT NULL DEFAULT '0', \`confirmedAt\` datetime(6) NULL, \`createdAt\` datetime(6) NOT NULL DEFAULT CURRENT_TIMESTAMP(6), UNIQUE INDEX \`user_email\` (\`email\`), PRIMARY KEY (\`id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`mail_token\` (\`hash\` char(64) NOT NULL, \`purpose\` varchar(16) NOT NULL, \`userId\` uuid NOT NULL, \`expiresAt\` datetime(6) NOT NULL, \`createdAt\` datetime(6) NOT NULL DEFAULT CURRENT_TIMESTAMP(6), INDEX \`mail_token_user\` (\`userId\`), PRIMARY KEY (\`hash\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`citation\` (\`id\` uuid NOT NULL, \`key\` varchar(80) CHARACTER SET "ascii" COLLATE "ascii_general_ci" NOT NULL, \`entryType\` varchar(40) NOT NULL, \`sourceBibtex\` mediumtext NOT NULL, \`entryBibtex\` mediumtext NOT NULL, \`csl\` mediumtext NOT NULL, \`doi\` varchar(255) CHARACTER SET "utf8mb4" COLLATE "utf8mb4_bin" NULL, \`arxiv\` varchar(40) CHARACTER SET "ascii" COLLATE "ascii_bin" NULL, \`arxivVersion\` int NULL, \`bibcode\` varchar(19) CHARACTER SET "ascii" COLLATE "ascii_bin" NULL, \`title\` text NOT NULL, \`titleMatch\` varchar(500) CHARACTER SET "utf8mb4" COLLATE "utf8mb4_bin" NOT NULL, \`year\` int NULL, \`authors\` json NOT NULL, \`authorNames\` json NOT NULL, \`container\` text NULL, \`volume\` varchar(100) NULL, \`pages\` varchar(100) NULL, \`shortName\` varchar(255) NOT NULL, \`createdById\` uuid NULL, \`createdAt\` datetime(6) NOT NULL DEFAULT CURRENT_TIMESTAMP(6), UNIQUE INDEX \`citation_key\` (\`key\`), UNIQUE INDEX \`citation_doi\` (\`doi\`), UNIQUE INDEX \`citation_arxiv\` (\`arxiv\`), UNIQUE INDEX \`citation_bibcode\` (\`bibcode\`), INDEX \`citation_title\` (\`titleMatch\`), INDEX \`citation_year\` (\`year\`), PRIMARY KEY (\`id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`citation_gate\` (\`id\` int NOT NULL, \`passes\` bigint UNSIGNED NOT NULL, PRIMARY KEY (\`id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`constraint_record\` (\`id\` int UNSIGNED NOT NULL AUTO_INCREMENT, \`state\` varchar(20) NOT NULL DEFAULT 'current', \`ownerId\` uuid NOT NULL, \`approvedRevisionId\` uuid NULL, \`importIdentity\` char(64) NULL, \`createdAt\` datetime(6) NOT NULL DEFAULT CURRENT_TIMESTAMP(6), INDEX \`IDX_a1df0bf2ac9ce1e9767b2fea89\` (\`ownerId\`), INDEX \`IDX_0ac6116858593e17dfc93bf699\` (\`approvedRevisionId\`), UNIQUE INDEX \`one_import\` (\`importIdentity\`), PRIMARY KEY (\`id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`revision\` (\`id\` uuid NOT NULL, \`constraintId\` int UNSIGNED NOT NULL, \`ordinal\` int UNSIGNED NOT NULL, \`state\` varchar(20) NOT NULL, \`version\` int UNSIGNED NOT NULL DEFAULT '1', \`fields\` json NOT NULL, \`citationId\` uuid NULL, \`followsId\` uuid NULL, \`answers\` json NOT NULL, \`findings\` json NOT NULL, \`createdAt\` datetime(6) NOT NULL, \`updatedAt\` datetime(6) NOT NULL, \`submittedAt\` datetime(6) NULL, \`licence\` varchar(120) NULL, \`claimedById\` uuid NULL, \`claimedUntil\` datetime(6) NULL, \`decidedById\` uuid NULL, \`decidedAt\` datetime(6) NULL, \`decisionNote\` text NULL, \`quantity\` varchar(30) NULL, \`kind\` varchar(20) NULL, \`weighting\` varchar(20) NULL, \`versionRead\` varchar(20) NULL, \`zUsed\` double NULL, \`year\` int NULL, \`families\` varchar(250) NOT NULL DEFAULT ',', \`tags\` varchar(1000) NOT NULL DEFAULT ',', \`alternativesKey\` varchar(120) NULL, \`searchText\` mediumtext NOT NULL, INDEX \`IDX_22100aa29662bbc84a7f8aed54\` (\`zUsed\`), INDEX \`by_statement\` (\`quantity\`, \`kind\`), INDEX \`by_state\` (\`state\`, \`submittedAt\`), UNIQUE INDEX \`one_ordinal\` (\`constraintId\`, \`ordinal\`), PRIMARY KEY (\`id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`revision_data\` (\`id\` int UNSIGNED NOT NULL AUTO_INCREMENT, \`revisionId\` uuid NOT NULL, \`comparable\` varchar(200) NOT NULL, \`name\` varchar(300) NOT NULL, INDEX \`IDX_56596254c7f98cdf8d8e9b3459\` (\`revisionId\`), INDEX \`IDX_a2414139453eaeba5718ea92ef\` (\`comparable\`), PRIMARY KEY (\`id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`event\` (\`sequence\` int UNSIGNED NOT NULL, \`at\` datetime(6) NOT NULL, \`kind\` varchar(60) NOT NULL, \`actorId\` varchar(36) NULL, \`subject\` varchar(120) NOT NULL, \`detail\` json NOT NULL, \`previousDigest\` char(64) NOT NULL, \`digest\` char(64) NOT NULL, INDEX \`IDX_ed67a33504ee34fc2202d14408\` (\`subject\`), PRIMARY KEY (\`sequence\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`event_head\` (\`id\` int NOT NULL, \`sequence\` int UNSIGNED NOT NULL, \`digest\` char(64) NOT NULL, PRIMARY KEY (\`id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`import_match\` (\`id\` uuid NOT NULL, \`ownerId\` uuid NOT NULL, \`signature\` char(64) NOT NULL, \`columns\` json NOT NULL, \`words\` json NOT NULL, \`updatedAt\` datetime(6) NOT NULL, UNIQUE INDEX \`one_match\` (\`ownerId\`, \`signature\`), PRIMARY KEY (\`id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`caught_mail\` (\`id\` bigint UNSIGNED NOT NULL AUTO_INCREMENT, \`to\` varchar(254) NOT NULL, \`subject\` varchar(255) NOT NULL, \`text\` mediumtext NOT NULL, \`at\` datetime(6) NOT NULL DEFAULT CURRENT_TIMESTAMP(6), PRIMARY KEY (\`id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`outbox_mail\` (\`id\` bigint UNSIGNED NOT NULL AUTO_INCREMENT, \`to\` varchar(254) NOT NULL, \`subject\` varchar(200) NOT NULL, \`text\` mediumtext NOT NULL, \`createdAt\` datetime(6) NOT NULL DEFAULT CURRENT_TIMESTAMP(6), \`tries\` int NOT NULL DEFAULT '0', \`nextTryAt\` datetime(6) NOT NULL DEFAULT CURRENT_TIMESTAMP(6), \`deliveredAt\` datetime(6) NULL, \`failedAt\` datetime(6) NULL, INDEX \`outbox_mail_due\` (\`deliveredAt\`, \`nextTryAt\`), PRIMARY KEY (\`id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`field_comment\` (\`id\` uuid NOT NULL, \`revisionId\` uuid NOT NULL, \`position\` int NOT NULL, \`field\` varchar(60) NOT NULL, \`text\` text NOT NULL, \`byId\` uuid NOT NULL, \`at\` datetime(6) NOT NULL, \`answer\` text NULL, INDEX \`IDX_a6aa2bcdaec61104e966886f06\` (\`revisionId\`), PRIMARY KEY (\`id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`reading\` (\`id\` uuid NOT NULL, \`revisionId\` uuid NOT NULL, \`editorId\` uuid NOT NULL, \`storedAt\` datetime(6) NOT NULL, \`first\` json NOT NULL, \`latest\` json NOT NULL, \`typed\` json NOT NULL, \`corrections\` json NOT NULL, UNIQUE INDEX \`one_reading\` (\`revisionId\`, \`editorId\`), PRIMARY KEY (\`id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`rate_limit\` (\`key\` varchar(255) CHARACTER SET "utf8mb4" COLLATE "utf8mb4_bin" NOT NULL, \`points\` int NOT NULL DEFAULT '0', \`expire\` bigint UNSIGNED NULL, PRIMARY KEY (\`key\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`fitting_table\` (\`slug\` varchar(24) NOT NULL, \`name\` varchar(120) NOT NULL, \`ownerId\` uuid NOT NULL, \`createdAt\` datetime(6) NOT NULL, \`deletedAt\` datetime(6) NULL, \`digest\` char(64) NOT NULL, \`lastEventSequence\` int UNSIGNED NOT NULL, \`lastEventDigest\` char(64) NOT NULL, \`lastEventAt\` datetime(6) NOT NULL, \`snapshot\` json NOT NULL, INDEX \`IDX_0ac03996d671e8a57f0429dfb4\` (\`ownerId\`), PRIMARY KEY (\`slug\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`upload\` (\`id\` uuid NOT NULL, \`ownerId\` uuid NOT NULL, \`name\` varchar(200) NOT NULL, \`kind\` varchar(10) NOT NULL, \`text\` mediumtext NOT NULL, \`createdAt\` datetime(6) NOT NULL DEFAULT CURRENT_TIMESTAMP(6), \`expiresAt\` datetime(6) NOT NULL, INDEX \`IDX_ba11fe39c5b18965d8f468d3ce\` (\`ownerId\`), INDEX \`IDX_1a7ca968c913e46482f034a824\` (\`expiresAt\`), PRIMARY KEY (\`id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`session\` (\`session_id\` varchar(128) CHARACTER SET "utf8mb4" COLLATE "utf8mb4_bin" NOT NULL, \`expires\` int UNSIGNED NOT NULL, \`data\` mediumtext NULL, INDEX \`session_expires\` (\`expires\`), PRIMARY KEY (\`session_id\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `CREATE TABLE \`setting\` (\`name\` varchar(64) NOT NULL, \`value\` text NOT NULL, PRIMARY KEY (\`name\`)) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `ALTER TABLE \`role_grant\` ADD CONSTRAINT \`FK_bb38408c2013c5de68d6086a84b\` FOREIGN KEY (\`userId\`) REFERENCES \`user\`(\`id\`) ON DELETE CASCADE ON UPDATE NO ACTION`,
    );
    await queryRunner.query(
      `ALTER TABLE \`mail_token\` ADD CONSTRAINT \`FK_bafb85c5f9bd9fe2de255912367\` FOREIGN KEY (\`userId\`) REFERENCES \`user\`(\`id\`) ON DELETE CASCADE ON UPDATE NO ACTION`,
    );
    await queryRunner.query(
      `ALTER TABLE \`constraint_record\` ADD CONSTRAINT \`FK_a1df0bf2ac9ce1e9767b2fea895\` FOREIGN KEY (\`ownerId\`) REFERENCES \`user\`(\`id\`) ON DELETE RESTRICT ON UPDATE NO ACTION`,
    );
    await queryRunner.query(
      `ALTER TABLE \`revision\` ADD CONSTRAINT \`FK_16da9d87b7e27fd96efe8933e61\` FOREIGN KEY (\`constraintId\`) REFERENCES \`constraint_record\`(\`id\`) ON DELETE CASCADE ON UPDATE NO ACTION`,
    );
    await queryRunner.query(
      `ALTER TABLE \`revision\` ADD CONSTRAINT \`FK_47af844687507f1d2951a82d669\` FOREIGN KEY (\`citationId\`) REFERENCES \`citation\`(\`id\`) ON DELETE RESTRICT ON UPDATE NO ACTION`,
    );
    await queryRunner.query(
      `ALTER TABLE \`revision_data\` ADD CONSTRAINT \`FK_56596254c7f98cdf8d8e9b3459c\` FOREIGN KEY (\`revisionId\`) REFERENCES \`revision\`(\`id\`) ON DELETE CASCADE ON UPDATE NO ACTION`,
    );
    await queryRunner.query(
      `ALTER TABLE \`import_match\` ADD CONSTRAINT \`FK_1a3b916666f9a5abab7a28c2845\` FOREIGN KEY (\`ownerId\`) REFERENCES \`user\`(\`id\`) ON DELETE CASCADE ON UPDATE NO ACTION`,
    );
    await queryRunner.query(
      `ALTER TABLE \`field_comment\` ADD CONSTRAINT \`FK_a6aa2bcdaec61104e966886f06e\` FOREIGN KEY (\`revisionId\`) REFERENCES \`revision\`(\`id\`) ON DELETE CASCADE ON UPDATE NO ACTION`,
    );
    await queryRunner.query(
      `ALTER TABLE \`reading\` ADD CONSTRAINT \`FK_5e1e1855933f64cec14fe135098\` FOREIGN KEY (\`revisionId\`) REFERENCES \`revision\`(\`id\`) ON DELETE CASCADE ON UPDATE NO ACTION`,
    );
    await queryRunner.query(
      `ALTER TABLE \`fitting_table\` ADD CONSTRAINT \`FK_0ac03996d671e8a57f0429dfb49\` FOREIGN KEY (\`ownerId\`) REFERENCES \`user\`(\`id\`) ON DELETE RESTRICT ON UPDATE NO ACTION`,
    );
    await queryRunner.query(
      `ALTER TABLE \`upload\` ADD CONSTRAINT \`FK_ba11fe39c5b18965d8f468d3ce3\` FOREIGN KEY (\`ownerId\`) REFERENCES \`user\`(\`id\`) ON DELETE CASCADE ON UPDATE NO ACTION`,
    );
  }

  public async down(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query(
      `ALTER TABLE \`upload\` DROP FOREIGN KEY \`FK_ba11fe39c5b18965d8f468d3ce3\``,
    );
    await queryRunner.query(
      `ALTER TABLE \`fitting_table\` DROP FOREIGN KEY \`FK_0ac03996d671e8a57f0429dfb49\``,
    );
    await queryRunner.query(
      `ALTER TABLE \`reading\` DROP FOREIGN KEY \`FK_5e1e1855933f64cec14fe135098\``,
    );
    await queryRunner.query(
      `ALTER TABLE \`field_comment\` DROP FOREIGN KEY \`FK_a6aa2bcdaec61104e966886f06e\``,
    );
    await queryRunner.query(
      `ALTER TABLE \`import_match\` DROP FOREIGN KEY \`FK_1a3b916666f9a5abab7a28c2845\``,
    );
    await queryRunner.query(
      `ALTER TABLE \`revision_data\` DROP FOREIGN KEY \`FK_56596254c7f98cdf8d8e9b3459c\``,
    );
    await queryRunner.query(
      `ALTER TABLE \`revision\` DROP FOREIGN KEY \`FK_47af844687507f1d2951a82d669\``,
    );
    await queryRunner.query(
      `ALTER TABLE \`revision\` DROP FOREIGN KEY \`FK_16da9d87b7e27fd96efe8933e61\``,
    );
    await queryRunner.query(
      `ALTER TABLE \`constraint_record\` DROP FOREIGN KEY \`FK_a1df0bf2ac9ce1e9767b2fea895\``,
    );
    await queryRunner.query(
      `ALTER TABLE \`mail_token\` DROP FOREIGN KEY \`FK_bafb85c5f9bd9fe2de255912367\``,
    );
    await queryRunner.query(
      `ALTER TABLE \`role_grant\` DROP FOREIGN KEY \`FK_bb38408c2013c5de68d6086a84b\``,
    );
    await queryRunner.query(`DROP TABLE \`setting\``);
    await queryRunner.query(`DROP INDEX \`session_expires\` ON \`session\``);
    await queryRunner.query(`DROP TABLE \`session\``);
    await queryRunner.query(`DROP INDEX \`IDX_1a7ca968c913e46482f034a824\` ON \`upload\``);
    await queryRunner.query(`DROP INDEX \`IDX_ba11fe39c5b18965d8f468d3ce\` ON \`upload\``);
    await queryRunner.query(`DROP TABLE \`upload\``);
    await queryRunner.query(`DROP INDEX \`IDX_0ac03996d671e8a57f0429dfb4\` ON \`fitting_table\``);
    await queryRunner.query(`DROP TABLE \`fitting_table\``);
    await queryRunner.query(`DROP TABLE \`rate_limit\``);
    await queryRunner.query(`DROP INDEX \`one_reading\` ON \`reading\``);
    await queryRunner.query(`DROP TABLE \`reading\``);
    await queryRunner.query(`DROP INDEX \`IDX_a6aa2bcdaec61104e966886f06\` ON \`field_comment\``);
    await queryRunner.query(`DROP TABLE \`field_comment\``);
    await queryRunner.query(`DROP INDEX \`outbox_mail_due\` ON \`outbox_mail\``);
    await queryRunner.query(`DROP TABLE \`outbox_mail\``);
    await queryRunner.query(`DROP TABLE \`caught_mail\``);
    await queryRunner.query(`DROP INDEX \`one_match\` ON \`import_match\``);
    await queryRunner.query(`DROP TABLE \`import_match\``);
    await queryRunner.query(`DROP TABLE \`event_head\``);
    await queryRunner.query(`DROP INDEX \`IDX_ed67a33504ee34fc2202d14408\` ON \`event\``);
    await queryRunner.query(`DROP TABLE \`event\``);
    await queryRunner.query(`DROP INDEX \`IDX_a2414139453eaeba5718ea92ef\` ON \`revision_data\``);
    await queryRunner.query(`DROP INDEX \`IDX_56596254c7f98cdf8d8e9b3459\` ON \`revision_data\``);
    await queryRunner.query(`DROP TABLE \`revision_data\``);
    await queryRunner.query(`DROP INDEX \`one_ordinal\` ON \`revision\``);
    await queryRunner.query(`DROP INDEX \`by_state\` ON \`revision\``);
    await queryRunner.query(`DROP INDEX \`by_statement\` ON \`revision\``);
    await queryRunner.query(`DROP INDEX \`IDX_22100aa29662bbc84a7f8aed54\` ON \`revision\``);
    await queryRunner.query(`DROP TABLE \`revision\``);
    await queryRunner.query(`DROP INDEX \`one_import\` ON \`constraint_record\``);
    await queryRunner.query(
      `DROP INDEX \`IDX_0ac6116858593e17dfc93bf699\` ON \`constraint_record\``,
    );
    await queryRunner.query(
      `DROP INDEX \`IDX_a1df0bf2ac9ce1e9767b2fea89\` ON \`constraint_record\``,
    );
    await queryRunner.query(`DROP TABLE \`constraint_record\``);
    await queryRunner.query(`DROP TABLE \`citation_gate\``);
    await queryRunner.query(`DROP INDEX \`citation_year\` ON \`citation\``);
    await queryRunner.query(`DROP INDEX \`citation_title\` ON \`citation\``);
    await queryRunner.query(`DROP INDEX \`citation_bibcode\` ON \`citation\``);
    await queryRunner.query(`DROP INDEX \`citation_arxiv\` ON \`citation\``);
    await queryRunner.query(`DROP INDEX \`citation_doi\` ON \`citation\``);
    await queryRunner.query(`DROP INDEX \`citation_key\` ON \`citation\``);
    await queryRunner.query(`DROP TABLE \`citation\``);
    await queryRunner.query(`DROP INDEX \`mail_token_user\` ON \`mail_token\``);
    await queryRunner.query(`DROP TABLE \`mail_token\``);
    await queryRunner.query(`DROP INDEX \`user_email\` ON \`user\``);
    await queryRunner.query(`DROP TABLE \`user\``);
    await queryRunner.query(`DROP TABLE \`role_grant\``);
  }
}
