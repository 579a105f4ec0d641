import { spawn, spawnSync, type ChildProcess } from "node:child_process";
import { existsSync, mkdtempSync, readFileSync, readdirSync, rmSync, statSync } from "node:fs";
import os from "node:os";
import path from "node:path";

import { freePort } from "../../scripts/lib/mariadb";

const ROOT = path.resolve(__dirname, "../..");

interface Start {
  process: ChildProcess;
  /** Exit code once it has ended. */
  ended: Promise<number | null>;
  output(): string;
}

let folder: string;
let port: number;
let data: string;
const started: Start[] = [];

beforeAll(async () => {
  folder = mkdtempSync(path.join(os.tmpdir(), "start-"));
  data = path.join(folder, "data");
  port = await freePort();
});

afterAll(async () => {
  for (const { process: child, ended } of started) {
    child.kill("SIGTERM");
    await ended;
  }
  rmSync(folder, { recursive: true, force: true });
});

/** `npm start` without npm, over this test's own data folder. */
function start(env: Record<string, string> = {}): Start {
  const child = spawn(process.execPath, [path.join(ROOT, "scripts/start.js")], {
    cwd: ROOT,
    env: { ...process.env, FOGLINE_DATA: data, PORT: String(port), TMPDIR: folder, ...env },
    stdio: ["ignore", "pipe", "pipe"],
  });
  let said = "";
  for (const stream of [child.stdout, child.stderr]) stream.on("data", (chunk) => (said += chunk));
  const ended = new Promise<number | null>((resolve) => child.once("close", resolve));
  const run = { process: child, ended, output: () => said };
  started.push(run);
  return run;
}

async function untilServing(run: Start): Promise<void> {
  let over = false;
  void run.ended.then(() => (over = true));
  // The last words of what it says then: they come in pieces.
  while (!run.output().includes("Stop with Ctrl-C")) {
    if (over) throw new Error(`npm start ended: ${run.output()}`);
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
}

/** Command lines of all processes that have to do with this test's data folder. */
function processesOverData(): string[] {
  return readdirSync("/proc")
    .filter((name) => /^\d+$/.test(name))
    .flatMap((pid) => {
      try {
        return [readFileSync(`/proc/${pid}/cmdline`, "utf8").replaceAll("\0", " ")];
      } catch {
        return [];
      }
    })
    .filter((line) => line.includes(data));
}

const RELEASE_FILES = [
  "json",
  "csv",
  "ecsv",
  "vot",
  "txt",
  "bib",
  "cff",
  "citation.bib",
  "citation.json",
];

/** Addresses of all that a stranger can download: lists, each record's citation, each table's and release's files. */
async function publicFiles(): Promise<string[]> {
  const query =
    "{ constraints(limit: 500) { constraints { number } } fittingTables { slug files { path } } releases { number } }";
  const response = await fetch(`http://127.0.0.1:${port}/graphql`, {
    method: "POST",
    headers: { "content-type": "application/json" },
    body: JSON.stringify({ query }),
  });
  const { data: found } = (await response.json()) as {
    data: {
      constraints: { constraints: { number: string }[] };
      fittingTables: { slug: string; files: { path: string }[] }[];
      releases: { number: number }[];
    };
  };
  const records = found.constraints.constraints.map(({ number }) => number);
  const files = found.fittingTables.flatMap((table) => table.files.map(({ path: at }) => at));
  const releases = found.releases.map(({ number }) => number);
  expect([records.length > 15, files.length > 20, releases.length > 0]).toEqual([true, true, true]);
  return [
    "/api/constraints.csv",
    "/api/constraints.bib",
    ...records.map((number) => `/api/constraints/${number}.bib`),
    ...files,
    ...releases.flatMap((number) => RELEASE_FILES.map((kind) => `/api/releases/${number}.${kind}`)),
  ];
}

async function bytesOf(addresses: readonly string[]): Promise<[string, number, string][]> {
  return Promise.all(
    addresses.map(async (address): Promise<[string, number, string]> => {
      const response = await fetch(`http://127.0.0.1:${port}${address}`);
      return [
        address,
        response.status,
        Buffer.from(await response.arrayBuffer()).toString("base64"),
      ];
    }),
  );
}

/** Runs a command of the README over this test's data folder. */
function command(script: string, ...words: string[]): void {
  const result = spawnSync(process.execPath, [path.join(ROOT, "scripts", script), ...words], {
    cwd: ROOT,
    env: { ...process.env, FOGLINE_DATA: data, TMPDIR: folder },
    encoding: "utf8",
  });
  if (result.status !== 0) throw new Error(`${script} ended: ${result.stdout}${result.stderr}`);
}

const answer = async (address: string) =>
  (await fetch(`http://127.0.0.1:${port}${address}`)).status;

it("a first start makes the database, seeds the demonstration, serves, and says how", async () => {
  const run = start();
  await untilServing(run);
  expect(run.output()).toContain(`http://127.0.0.1:${port}`);
  for (const who of ["reader", "contributor", "editor", "maintainer"])
    expect(run.output()).toContain(`${who}@fogline.example`);
  expect(run.output()).toMatch(/^ +\d+\.\d s {2}database migrated, demonstration seeded$/m);
  expect([await answer("/readyz"), await answer("/")]).toEqual([200, 200]);
});

it("the password is in a file for its owner only, and on no command line", () => {
  const secret = path.join(data, "secret.json");
  const { password } = JSON.parse(readFileSync(secret, "utf8"));
  expect(password).toMatch(/^[0-9a-f]{48}$/);
  expect((statSync(secret).mode & 0o777).toString(8)).toBe("600");
  const lines = processesOverData();
  expect(lines.some((line) => line.includes("mariadbd"))).toBe(true);
  expect(lines.join("\n")).not.toContain(password);
});

it("killed without warning, it leaves a database that the next start takes up, unseeded", async () => {
  const [first] = started;
  first?.process.kill("SIGKILL");
  await first?.ended;
  const next = start();
  await untilServing(next);
  expect(next.output()).toContain("maintainer@fogline.example");
  expect(next.output()).not.toContain("seeded");
  expect(await answer("/readyz")).toBe(200);
});

it("SIGTERM stops everything it started, with exit code 0, and leaves no temporary folder", async () => {
  const run = started.at(-1) as Start;
  run.process.kill("SIGTERM");
  expect(await run.ended).toBe(0);
  expect(run.output()).toContain("Stopped.");
  expect(processesOverData()).toEqual([]);
  await expect(answer("/healthz")).rejects.toThrow();
  expect(readdirSync(folder)).toEqual(["data"]);
});

it("stopped in the middle of a step, it stops what that step had started too", async () => {
  const run = start();
  while (!run.output().includes("MariaDB started"))
    await new Promise((resolve) => setTimeout(resolve, 20));
  run.process.kill("SIGINT");
  expect(await run.ended).toBe(130);
  expect(processesOverData()).toEqual([]);
});

it("backup, wipe, restore: every public file comes back with the same bytes", async () => {
  const run = start();
  await untilServing(run);
  const addresses = await publicFiles();
  const before = await bytesOf(addresses);
  const backup = path.join(folder, "backup");
  command("backup.js", backup);
  run.process.kill("SIGTERM");
  expect(await run.ended).toBe(0);

  rmSync(data, { recursive: true });
  command("restore.js", backup);
  const again = start();
  await untilServing(again);
  expect(again.output()).not.toContain("seeded");
  expect(await publicFiles()).toEqual(addresses);
  expect(await bytesOf(addresses)).toEqual(before);
  expect(before.map(([, status]) => status)).toEqual(addresses.map(() => 200));
  again.process.kill("SIGTERM");
  expect(await again.ended).toBe(0);
  rmSync(backup, { recursive: true });
});

it("DEMO=0 refuses a registry that holds the demonstration, and a fresh one starts empty", async () => {
  const refused = start({ DEMO: "0" });
  expect(await refused.ended).toBe(1);
  expect(refused.output()).toContain("This database holds the demonstration");
  rmSync(data, { recursive: true });
  const empty = start({ DEMO: "0" });
  await untilServing(empty);
  expect(empty.output()).toContain("npm run grant");
  empty.process.kill("SIGTERM");
  await empty.ended;
  // Forgetting DEMO=0 later must not fill a real registry with invented data.
  const later = start();
  await untilServing(later);
  expect(later.output()).not.toContain("@fogline.example");
  later.process.kill("SIGTERM");
  expect(await later.ended).toBe(0);
  expect(existsSync(path.join(data, "running.json"))).toBe(false);
});
