import { randomBytes } from "node:crypto";
import path from "node:path";

import { createConnection, type Connection } from "mysql2/promise";
import request from "supertest";
import type { DataSource } from "typeorm";

import { buildApp } from "~server/app";
import { DEFAULT_LIMITS, readConfig } from "~server/config/config";
import { createDataSource } from "~server/database/dataSource";
import { DatabaseProblem, prepareDatabase } from "~server/database/prepare";
import { grantToApplication, isLogProtected } from "~server/database/privileges";
import { appendEvent, verifyChain } from "~server/event/eventLog";

import { buildUser, TEST_PASSWORD, TEST_PASSWORD_COST } from "../../factories/user";
import { createTestDatabase } from "../support/harness";

/** The two users of `npm start`: one owns the schema, one serves. */
describe("the running server's database user", () => {
  const name = `app_${randomBytes(6).toString("hex")}`;
  let database: Awaited<ReturnType<typeof createTestDatabase>>;
  let owner: DataSource;
  let application: DataSource;
  let applicationUrl: string;
  let connection: Connection;

  beforeAll(async () => {
    database = await createTestDatabase();
    owner = createDataSource(database.url);
    await prepareDatabase(owner);
    await owner.query(`CREATE USER '${name}'@'%' IDENTIFIED BY 'it''s "secret"'`);
    applicationUrl = Object.assign(new URL(database.url), {
      username: name,
      password: encodeURIComponent(`it's "secret"`),
    }).href;
    expect(await grantToApplication(owner, applicationUrl)).toBe(true);
    application = createDataSource(applicationUrl);
    await prepareDatabase(application);
    connection = await createConnection(applicationUrl);
  }, 60_000);

  afterAll(async () => {
    await connection?.end();
    await application?.destroy();
    await owner?.query(`DROP USER '${name}'@'%'`);
    await owner?.destroy();
    await database?.drop();
  });

  const append = (): Promise<void> =>
    application.transaction((manager) =>
      appendEvent(manager, { kind: "table.deleted", actorId: null, subject: "table:x" }),
    );

  it("adds to the log, and the database refuses every other change there", async () => {
    await append();
    await append();
    for (const statement of [
      "UPDATE event SET subject = 'FL-0001' WHERE sequence = 1",
      "DELETE FROM event WHERE sequence = 2",
      "DELETE FROM event",
      "TRUNCATE TABLE event",
      "DROP TABLE event",
      "RENAME TABLE event TO other",
      "ALTER TABLE event DROP COLUMN detail",
      "ALTER TABLE event ADD COLUMN extra INT",
      "REPLACE INTO event SELECT * FROM event WHERE sequence = 1",
      "INSERT INTO event SELECT * FROM event WHERE sequence = 1 ON DUPLICATE KEY UPDATE subject = 'x'",
      "CREATE TRIGGER t BEFORE INSERT ON event FOR EACH ROW SET NEW.subject = 'x'",
      "CREATE OR REPLACE TABLE event (id INT)",
      "DELETE FROM event_head",
      "DROP TABLE event_head",
      "DELETE FROM migrations",
      "CREATE TABLE mine (id INT)",
      `GRANT UPDATE ON event TO '${name}'@'%'`,
    ]) {
      const outcome = await connection.query(statement).then(
        () => "done",
        (error: { code: string }) => error.code,
      );
      expect([statement, outcome]).toEqual([
        statement,
        expect.stringMatching(/^ER_(TABLEACCESS|DBACCESS|ACCESS|SPECIFIC_ACCESS)_DENIED_ERROR$/),
      ]);
    }
    expect(await verifyChain(owner.manager)).toEqual({ intact: true, events: 2 });
    expect(await isLogProtected(applicationUrl)).toBe(true);
  });

  it("is enough for the application: sign in, keep a draft, see it again", async () => {
    const config = {
      ...readConfig({ DATABASE_URL: applicationUrl, PUBLIC_URL: "http://fogline.test" }),
      logLevel: "silent",
      passwordCost: TEST_PASSWORD_COST,
      webRoot: path.join(__dirname, "../support/web"),
      limits: DEFAULT_LIMITS,
    };
    const { app, close } = await buildApp(config, application);
    try {
      const user = await buildUser(application.manager, ["contributor"]);
      const agent = request.agent(app);
      const ask = async (query: string, variables: object = {}) =>
        (await agent.post("/graphql").send({ query, variables })).body;
      const signedIn = await ask(
        "mutation ($email: String!, $password: String!) { signIn(email: $email, password: $password) { __typename } }",
        { email: user.email, password: TEST_PASSWORD },
      );
      expect(signedIn.data.signIn.__typename).toBe("Viewer");
      const started = await ask("mutation { startDraft { ... on Submission { id } } }");
      const mine = await ask("{ mySubmissions { id } }");
      expect(mine.data.mySubmissions).toEqual([{ id: started.data.startDraft.id }]);
    } finally {
      await close();
    }
  });

  it("gets the rights in a new table, and loses those in the log that it had before", async () => {
    await owner.query("CREATE TABLE later (id INT)");
    await owner.query(`GRANT UPDATE, DELETE ON event TO '${name}'@'%'`);
    expect(await isLogProtected(applicationUrl)).toBe(false);
    await grantToApplication(owner, applicationUrl);
    expect(await isLogProtected(applicationUrl)).toBe(true);
    await connection.query("INSERT INTO later VALUES (1)");
    await owner.query("DROP TABLE later");
  });

  it("with one user for both, the log is not protected, and that is known", async () => {
    expect(await grantToApplication(owner, database.url)).toBe(false);
    expect(await isLogProtected(database.url)).toBe(false);
  });

  it("can't migrate, and says who can", async () => {
    const rows = await owner.query("SELECT * FROM migrations ORDER BY id DESC LIMIT 1");
    await owner.query("DELETE FROM migrations WHERE id = ?", [rows[0].id]);
    await expect(prepareDatabase(application)).rejects.toThrow(DatabaseProblem);
    await owner.query("INSERT INTO migrations VALUES (?, ?, ?)", Object.values(rows[0]));
  });
});
