import "reflect-metadata";

import { createDataSource } from "./dataSource";

/**
 * Data source of TypeORM's command line; DATABASE_URL names the database to compare with:
 * node -r @swc-node/register node_modules/typeorm/cli.js migration:generate -d server/database/cli.ts FILE
 */
export default createDataSource(process.env.DATABASE_URL ?? "");
