import type { MigrationInterface, QueryRunner } from "typeorm";

export class ApiTokens1796130000035 implements MigrationInterface {
  name = "ApiTokens1796130000035";

  public async up(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query(
      `CREATE TABLE \`api_token\` (
        \`id\` uuid NOT NULL,
        \`ownerId\` uuid NOT NULL,
        \`name\` varchar(60) NOT NULL,
        \`scopes\` json NOT NULL,
        \`hash\` char(64) CHARACTER SET "ascii" COLLATE "ascii_bin" NOT NULL,
        \`start\` varchar(12) CHARACTER SET "ascii" COLLATE "ascii_bin" NOT NULL,
        \`createdAt\` datetime(6) NOT NULL DEFAULT CURRENT_TIMESTAMP(6),
        \`expiresAt\` datetime(6) NOT NULL,
        \`lastUsedAt\` datetime(6) NULL,
        \`revokedAt\` datetime(6) NULL,
        INDEX \`api_token_owner\` (\`ownerId\`),
        UNIQUE INDEX \`api_token_hash\` (\`hash\`),
        PRIMARY KEY (\`id\`)
      ) ENGINE=InnoDB`,
    );
    await queryRunner.query(
      `ALTER TABLE \`api_token\` ADD CONSTRAINT \`FK_27a75ebb5cf91dcbdc882cfc3fa\` FOREIGN KEY (\`ownerId\`) REFERENCES \`user\`(\`id\`) ON DELETE CASCADE ON UPDATE NO ACTION`,
    );
  }

  public async down(queryRunner: QueryRunner): Promise<void> {
    await queryRunner.query(`DROP TABLE \`api_token\``);
  }
}
