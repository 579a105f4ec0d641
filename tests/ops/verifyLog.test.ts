import { readFileSync } from "node:fs";
import path from "node:path";

import type { RowDataPacket } from "mysql2/promise";

import {
  command,
  emptyDatabase,
  temporaryFolder,
  type Outcome,
  type TestDatabase,
} from "./support";

const folder = temporaryFolder();
const backup = path.join(folder, "backup");
let registry: TestDatabase;

/** As the operator of one data folder says it. */
const say = (script: string, args: string[], data: string): Outcome =>
  command(script, args, { DATABASE_URL: registry.url, FOGLINE_DATA: path.join(folder, data) });
const verifyLog = (data: string, ...args: string[]): Outcome => say("verifyLog.js", args, data);

async function lastEvents(): Promise<{ sequence: number; digest: string }[]> {
  const [rows] = await registry.connection.query<RowDataPacket[]>(
    "SELECT sequence, digest FROM event ORDER BY sequence DESC LIMIT 2",
  );
  return rows.map(({ sequence, digest }) => ({ sequence, digest }));
}

beforeAll(async () => {
  registry = await emptyDatabase();
  const made = command("tasks/prepareDatabase.js", [], { DATABASE_URL: registry.url, DEMO: "1" });
  if (made.code !== 0) throw new Error(made.output);
  const written = say("backup.js", [backup], "data");
  if (written.code !== 0) throw new Error(written.output);
}, 120_000);

it("holds the log of the demonstration against a backup, told of it or remembered", async () => {
  const [last] = await lastEvents();
  const remembered = verifyLog("data");
  expect(remembered).toEqual({ code: 0, output: expect.stringContaining("The event log holds: ") });
  expect(remembered.output).toContain(`in ${backup} (event ${last?.sequence})`);
  expect(remembered.output).toMatch(/The evidence holds: \d+ files\./);
  const told = verifyLog("elsewhere", "--against", backup);
  expect(told.code).toBe(0);
  expect(told.output).toContain(`in ${backup} (event ${last?.sequence})`);
  expect(verifyLog("elsewhere").output).not.toContain(backup);
}, 60_000);

it("finds a deleted last event though the head was set back, by the backup and by a head in hand", async () => {
  const [last, before] = await lastEvents();
  if (!last || !before) throw new Error("the demonstration has no events");
  await registry.connection.query("DELETE FROM event WHERE sequence = ?", [last.sequence]);
  await registry.connection.query("UPDATE event_head SET sequence = ?, digest = ?", [
    before.sequence,
    before.digest,
  ]);
  const outcomes = [
    verifyLog("data"),
    verifyLog("elsewhere", "--against", backup),
    verifyLog("elsewhere", "--head", `${last.sequence}:${last.digest}`),
  ];
  for (const { code, output } of outcomes) {
    expect([code, output]).toEqual([
      1,
      expect.stringContaining(`Event ${last.sequence}: the event is gone`),
    ]);
  }
}, 60_000);

it("a backup put back is no break: what lay beyond it is set aside, and named", async () => {
  const [before] = await lastEvents();
  const older = path.join(folder, "older");
  expect(say("backup.js", [older], "elsewhere").code).toBe(0);
  const restored = command(
    "restore.js",
    [older, "--force"],
    { DATABASE_URL: registry.url, FOGLINE_DATA: path.join(folder, "data") },
    "yes\n",
  );
  expect(restored.code).toBe(0);
  const { code, output } = verifyLog("data");
  expect(code).toBe(0);
  expect(output).toMatch(/Set aside by the restore of .* in .*backup/);
  const { eventLog } = JSON.parse(readFileSync(path.join(older, "manifest.json"), "utf8"));
  expect(eventLog.sequence).toBe(before?.sequence);
}, 60_000);

it("says what it does not understand", () => {
  for (const args of [["--against"], ["somewhere"], ["--head", "12"], ["--head", "1:abc"]]) {
    const { code, output } = verifyLog("data", ...args);
    expect([code, output]).toEqual([1, expect.stringContaining("npm run verify-log --")]);
  }
  const { code, output } = verifyLog("data", "--against", folder);
  expect([code, output]).toEqual([1, expect.stringContaining("holds no backup")]);
});
