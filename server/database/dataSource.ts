import { DataSource } from "typeorm";

import { entities } from "./entities";
import { migrations } from "./migrations";

/** A data source for the given address; connects only when it is initialized. */
export function createDataSource(databaseUrl: string): DataSource {
  return new DataSource({
    type: "mariadb",
    url: databaseUrl.replace(/^mysql:/, "mariadb:"),
    charset: "utf8mb4_unicode_ci",
    timezone: "Z",
    supportBigNumbers: true,
    bigNumberStrings: false,
    entities,
    migrations,
    migrationsTransactionMode: "each",
    synchronize: false,
    logging: false,
    extra: { connectionLimit: 10 },
  });
}
