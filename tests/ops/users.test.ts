import { spawnSync } from "node:child_process";
import { readFileSync, writeFileSync } from "node:fs";
import path from "node:path";

import { ROOT, temporaryFolder } from "./support";

const folder = temporaryFolder();

/** Starts the database of a data folder as `npm start` does, asks as both users, stops it. */
function visit(directory: string, ownersStatement: string): { owner: string[]; server: string[] } {
  const code = `
    const { createConnection } = require("mysql2/promise");
    const { startMariaDb } = require("./scripts/lib/mariadb");
    const { program } = require("./scripts/lib/program");
    const grantsOf = async (url) => {
      const connection = await createConnection(url);
      const [rows] = await connection.query("SHOW GRANTS");
      await connection.end();
      return rows.map((row) => Object.values(row)[0]);
    };
    program(async () => {
      const { url, applicationUrl } = await startMariaDb(process.argv[1]);
      const connection = await createConnection(url);
      await connection.query(process.argv[2]);
      await connection.end();
      const server = Object.assign(new URL(applicationUrl), { pathname: "/" }).href;
      process.stdout.write("FOUND" + JSON.stringify({ owner: await grantsOf(url), server: await grantsOf(server) }) + "\\n");
      return 0;
    });`;
  const { stdout, stderr } = spawnSync(process.execPath, ["-e", code, directory, ownersStatement], {
    cwd: ROOT,
    encoding: "utf8",
  });
  const found = /FOUND(.*)/.exec(stdout)?.[1];
  if (!found) throw new Error(stdout + stderr);
  return JSON.parse(found);
}

it("a data folder from before there were two database users gets the second at its next start", () => {
  const directory = path.join(folder, "data");
  const secret = path.join(directory, "secret.json");
  visit(directory, "CREATE TABLE kept (id INT)");
  // What such a folder holds: one password.
  const { password } = JSON.parse(readFileSync(secret, "utf8"));
  writeFileSync(secret, JSON.stringify({ password }));

  const { owner, server } = visit(directory, "INSERT INTO kept VALUES (1)");
  const now = JSON.parse(readFileSync(secret, "utf8"));
  expect(now.password).toBe(password);
  expect(now.applicationPassword).toMatch(/^[0-9a-f]{48}$/);
  expect(now.applicationPassword).not.toBe(password);
  expect(owner.join("\n")).toMatch(/ALL PRIVILEGES ON `fogline`\.\* TO .* WITH GRANT OPTION/);
  // Nothing but to enter: rights come table by table, after migrating.
  expect(server).toHaveLength(1);
  expect(server[0]).toContain("GRANT USAGE ON *.*");
}, 60_000);
