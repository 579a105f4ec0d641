import "reflect-metadata";

import { createDataSource } from "~server/database/dataSource";
import {
  DatabaseProblem,
  isReady,
  prepareDatabase,
  versionProblem,
} from "~server/database/prepare";
import { sessionSecret } from "~server/database/settings";

import { createTestDatabase } from "../support/harness";

it.each([
  "10.11.19-MariaDB-0+deb12u1",
  "10.7.1-MariaDB",
  "11.8.2-MariaDB",
  "5.5.5-10.11.19-MariaDB",
])("a MariaDB that is new enough is taken: %s", (version) => {
  expect(versionProblem(version)).toBeNull();
});

it.each(["10.6.18-MariaDB", "10.3.39-MariaDB-0+deb10u2", "5.5.68-MariaDB", "8.0.39", "9.1.0-log"])(
  "anything older, or no MariaDB, is refused in a sentence: %s",
  (version) => {
    expect(versionProblem(version)).toMatch(/^The database is .*needs MariaDB 10\.7 or newer\.$/);
  },
);

it("a database that is not there, or not ours, is named in a sentence", async () => {
  const server = new URL(process.env.TEST_DATABASE_URL ?? "");
  const missing = `${server.origin === "null" ? server.href.replace(/\/+$/, "") : server.origin}/fogline_never_made`;
  const cases = [
    ["mysql://nobody:x@127.0.0.1:1/fogline", /can't be reached/],
    [missing, /does not exist/],
    [`mysql://nobody:wrong@${server.host}/fogline`, /refused the user or password/],
  ] as const;
  for (const [url, sentence] of cases) {
    const promise = prepareDatabase(createDataSource(url));
    await expect(promise).rejects.toThrow(DatabaseProblem);
    await expect(promise).rejects.toThrow(sentence);
  }
});

it("several processes that start at once make one schema, and it matches the entities", async () => {
  const database = await createTestDatabase();
  const sources = [1, 2, 3].map(() => createDataSource(database.url));
  try {
    await Promise.all(sources.map((source) => prepareDatabase(source)));
    const [first] = sources;
    const drift = await first!.driver.createSchemaBuilder().log();
    expect(drift.upQueries.map(({ query }) => query)).toEqual([]);
    expect(await isReady(first!)).toBe(true);
    const secrets = await Promise.all(sources.map(({ manager }) => sessionSecret(manager)));
    expect(new Set(secrets).size).toBe(1);
    expect(secrets[0]!.length).toBeGreaterThanOrEqual(43);
  } finally {
    for (const source of sources) if (source.isInitialized) await source.destroy();
    await database.drop();
  }
});

it("text keeps every letter, also on a server whose own default is narrower", async () => {
  const database = await createTestDatabase();
  const source = createDataSource(database.url);
  try {
    await source.initialize();
    const name = new URL(database.url).pathname.slice(1);
    await source.query(`ALTER DATABASE ${name} CHARACTER SET latin1 COLLATE latin1_swedish_ci`);
    await prepareDatabase(source);
    const [row] = await source.query(
      `SELECT COUNT(*) AS n FROM information_schema.columns
       WHERE table_schema = ? AND character_set_name NOT IN ('utf8mb4', 'ascii')`,
      [name],
    );
    expect(Number(row.n)).toBe(0);
  } finally {
    await source.destroy();
    await database.drop();
  }
});
