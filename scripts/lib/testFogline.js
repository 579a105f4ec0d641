"use strict";
const fs = require("node:fs");
const os = require("node:os");
const path = require("node:path");

const { buildClient, buildServer } = require("./build");
const { addCounts, countReport } = require("./counts");
const { PlainFailure } = require("./failure");
const install = require("./install");
const { withProject } = require("./lock");
const { startMariaDb } = require("./mariadb");
const { CACHE, fromRoot, readJson } = require("./paths");
const { atEnd, isStopping, run } = require("./processes");
const { program } = require("./program");
const { say, step } = require("./steps");

const inCi = /^(1|true)$/i.test(process.env.CI ?? "");

function main() {
  let total = { passed: 0, failed: 0, skipped: 0 };
  program(
    async () => {
      const options = readArguments(process.argv.slice(2));
      await test(options, (counts) => (total = addCounts(total, counts)));
      return total.failed === 0 && total.passed > 0 ? 0 : 1;
    },
    {
      atLast(code) {
        // A run that broke off has failed, even if all its tests so far have passed.
        const failed = code !== 0 && total.failed === 0 ? 1 : total.failed;
        if (total.skipped > 0) say(`${total.skipped} skipped${inCi ? ", counted as failed" : ""}`);
        say(`${total.passed} passed, ${failed} failed`);
      },
    },
  );
}

/** `npm test -- shared server` runs only those projects; anything after `--` goes to Jest. */
function readArguments(words) {
  const known = ["shared", "server", "client", "ops", "e2e"];
  const projects = words.filter((word) => known.includes(word));
  return {
    projects: projects.length > 0 ? projects : known,
    jest: words.filter((word) => !known.includes(word)),
  };
}

async function test({ projects, jest }, add) {
  const folder = temporaryFolder();
  atEnd(() => fs.rmSync(folder, { recursive: true, force: true }));
  const log = path.join(folder, "tools.log");
  const withBrowser = projects.includes("e2e");
  install.requireSpace(fromRoot(), install.spaceNeeded({ database: true }));

  await install.ensurePrograms(install.MARIADB_SERVER, log);
  if (projects.includes("server")) await install.ensurePrograms(install.READERS, log);
  if (withBrowser) await install.ensurePrograms(install.CHROMIUM, log);
  await withProject(async () => {
    await install.ensureModules(log);
    if (withBrowser || projects.includes("ops")) await buildServer(log);
    if (withBrowser) await buildClient(log);
  });

  const database = await startMariaDb(path.join(folder, "fast"), { throwaway: true });
  const environment = {
    ...process.env,
    TEST_DATABASE_URL: database.url.replace(/\/[^/]*$/, ""),
    TMPDIR: folder,
    NODE_ENV: "test",
  };
  for (const name of [
    ...["DATABASE_URL", "DATABASE_OWNER_URL", "SMTP_URL", "PUBLIC_URL"],
    ...["PORT", "DEMO", "FOGLINE_DATA", "LOOKUP_URL"],
  ])
    delete environment[name];

  // In two goes: browsers and the many small files would starve each other.
  for (const group of [projects.filter((name) => name !== "e2e"), withBrowser ? ["e2e"] : []]) {
    if (group.length === 0) continue;
    const report = path.join(folder, `${group[0]}.json`);
    await step(`tests: ${group.join(", ")}`, () =>
      runJest(group, jest, report, environment, workersFor(group)),
    );
    add(readCounts(report));
  }
}

/** On two cores Jest would take one worker; a server test waits for its database half of the time. */
function workersFor(group) {
  const most = group[0] === "e2e" ? 2 : Math.max(2, os.availableParallelism() - 1);
  return [`--maxWorkers=${most}`];
}

async function runJest(projects, more, report, env, workers) {
  const args = [
    fromRoot("node_modules/jest/bin/jest.js"),
    ...["--selectProjects", ...projects],
    "--ci",
    "--passWithNoTests",
    ...["--json", "--outputFile", report],
    ...["--cacheDirectory", path.join(CACHE, "jest")],
    ...workers,
    ...more,
  ];
  // With --json the report would also go to the output; people read what goes to the error stream.
  await run(process.execPath, args, {
    env,
    allowFailure: true,
    stdio: ["ignore", "ignore", "inherit"],
  });
}

function readCounts(file) {
  const report = readJson(file);
  if (report === null) {
    if (isStopping()) return { passed: 0, failed: 0, skipped: 0 };
    throw new PlainFailure("Jest ended without a report; its own words stand above.");
  }
  return countReport(report, { skippedFails: inCi });
}

/** In memory if there is room: the test databases come and go by the dozen. */
function temporaryFolder() {
  const memory = "/dev/shm";
  const base = roomy(memory) ? memory : os.tmpdir().length <= 40 ? os.tmpdir() : "/tmp";
  return fs.mkdtempSync(path.join(base, "fogline-test-"));
}

function roomy(folder) {
  try {
    fs.accessSync(folder, fs.constants.W_OK);
    const { bavail, bsize } = fs.statfsSync(folder);
    return bavail * bsize > 2 * 1024 ** 3;
  } catch {
    return false;
  }
}

module.exports = { main };
