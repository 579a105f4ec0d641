import type { MigrationInterface } from "typeorm";

/** Every migration, oldest first. A list, not a glob: it is the same under swc, Jest and build/. */
export const migrations: (new () => MigrationInterface)[] = [];
