import { spawn, spawnSync } from "node:child_process";
import { randomBytes } from "node:crypto";
import { mkdtempSync, rmSync } from "node:fs";
import os from "node:os";
import path from "node:path";

import { createConnection, type Connection } from "mysql2/promise";

export const ROOT = path.resolve(__dirname, "../..");

/** A folder that goes away with the test file. */
export function temporaryFolder(): string {
  const folder = mkdtempSync(path.join(os.tmpdir(), "ops-"));
  afterAll(() => rmSync(folder, { recursive: true, force: true }));
  return folder;
}

export interface Outcome {
  code: number | null;
  output: string;
}

/** What commands remember in a data folder goes with the test file. */
const dataFolder = temporaryFolder();

/** Runs one of our commands to its end, as a person would, with `answer` typed into it. */
export function command(
  script: string,
  args: readonly string[],
  env: Readonly<Record<string, string>> = {},
  answer = "",
): Outcome {
  const { status, stdout, stderr } = spawnSync(
    process.execPath,
    [path.join(ROOT, "scripts", script), ...args],
    {
      cwd: ROOT,
      env: { ...process.env, FOGLINE_DATA: dataFolder, ...env },
      input: answer,
      encoding: "utf8",
    },
  );
  return { code: status, output: stdout + stderr };
}

/** Starts Node on a piece of code and waits for its first output. */
export async function background(code: string): Promise<{ pid: number; end(): void }> {
  const child = spawn(process.execPath, ["-e", code], { cwd: ROOT });
  await new Promise((resolve, reject) => {
    child.stdout.once("data", resolve);
    child.stderr.once("data", (chunk) => reject(new Error(String(chunk))));
  });
  return { pid: child.pid ?? 0, end: () => child.kill("SIGKILL") };
}

export interface TestDatabase {
  url: string;
  connection: Connection;
}

/** An empty database on the test server, dropped with the test file. */
export async function emptyDatabase(): Promise<TestDatabase> {
  const server = process.env.TEST_DATABASE_URL;
  if (!server) throw new Error("TEST_DATABASE_URL is missing: run npm test -- ops.");
  const name = `fogline_ops_${randomBytes(5).toString("hex")}`;
  const connection = await createConnection({ uri: server, charset: "utf8mb4" });
  await connection.query(
    `CREATE DATABASE ${name} CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci`,
  );
  await connection.query(`USE ${name}`);
  opened.push(async () => {
    await connection.query(`DROP DATABASE IF EXISTS ${name}`);
    await connection.end();
  });
  return { url: `${server.replace(/\/$/, "")}/${name}`, connection };
}

const opened: (() => Promise<void>)[] = [];

afterAll(async () => {
  for (const close of opened.splice(0)) await close();
});
