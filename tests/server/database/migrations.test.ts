import type { DataSource } from "typeorm";

import { createDataSource } from "~server/database/dataSource";
import { isReady, prepareDatabase } from "~server/database/prepare";

import { createTestDatabase } from "../support/harness";

describe("the migrations", () => {
  let database: Awaited<ReturnType<typeof createTestDatabase>>;
  let dataSource: DataSource;

  beforeAll(async () => {
    database = await createTestDatabase();
    dataSource = createDataSource(database.url);
    await prepareDatabase(dataSource);
  });

  afterAll(async () => {
    await dataSource?.destroy();
    await database?.drop();
  });

  it("make exactly the schema that the entities describe", async () => {
    const { upQueries } = await dataSource.driver.createSchemaBuilder().log();
    expect(upQueries.map(({ query }) => query)).toEqual([]);
  });

  it("are all on record once they ran, so that the server calls itself ready", async () => {
    const rows = await dataSource.query("SELECT name FROM migrations ORDER BY id");
    expect(rows.length).toBe(dataSource.migrations.length);
    expect(await isReady(dataSource)).toBe(true);
  });

  it("leave the server not ready while one of them waits", async () => {
    await dataSource.query("DELETE FROM migrations");
    expect(await isReady(dataSource)).toBe(false);
  });
});
