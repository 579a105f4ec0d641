"use strict";
const fs = require("node:fs");
const path = require("node:path");

const { PlainFailure } = require("./failure");
const { fromRoot } = require("./paths");
const { atEnd, endChild, startChild } = require("./processes");

const HELD_ELSEWHERE = 75;

/**
 * Takes a flock(1), kept by a helper that ends with our pipe: it goes away by itself even
 * after kill -9, so there is no stale lock to judge.
 *
 * @returns A function that releases it, or null if `wait` is false and another has it.
 */
async function takeLock(place, { wait }) {
  const how = wait ? [] : ["--nonblock", "--conflict-exit-code", String(HELD_ELSEWHERE)];
  const holder = startChild(
    "flock",
    [...how, place, "sh", "-c", "echo held; exec cat >/dev/null"],
    {
      stdio: ["pipe", "pipe", "ignore"],
    },
  );
  holder.stdin.on("error", () => {});
  const outcome = await Promise.race([
    new Promise((resolve) => holder.stdout.once("data", () => resolve("held"))),
    holder.ended,
  ]);
  if (outcome === "held")
    return async () => {
      holder.stdin.end();
      await endChild(holder, { graceMs: 1000 });
    };
  if (outcome.code === HELD_ELSEWHERE) return null;
  throw new PlainFailure(`${place} can't be locked: is this folder on a disk that allows it?`);
}

/**
 * Holds a data directory for this process alone.
 *
 * @throws {PlainFailure} If another process holds it.
 */
async function lockDirectory(directory, doing) {
  fs.mkdirSync(directory, { recursive: true, mode: 0o700 });
  const release = await takeLock(path.join(directory, "lock"), { wait: false });
  if (release === null) {
    const owner = readOwner(directory);
    throw new PlainFailure(
      `Fogline is already ${owner?.doing ?? "at work"} with this data folder` +
        `${owner ? ` (process ${owner.pid})` : ""}. Stop it first, then run the command again.`,
    );
  }
  fs.writeFileSync(ownerFile(directory), JSON.stringify({ pid: process.pid, doing }));
  atEnd(async () => {
    fs.rmSync(ownerFile(directory), { force: true });
    await release();
  });
}

/** Installs or builds while no other command does so in this project; waits for its turn. */
async function withProject(work) {
  const release = await takeLock(fromRoot("package.json"), { wait: true });
  try {
    return await work();
  } finally {
    await release();
  }
}

function ownerFile(directory) {
  return path.join(directory, "owner.json");
}

function readOwner(directory) {
  try {
    return JSON.parse(fs.readFileSync(ownerFile(directory), "utf8"));
  } catch {
    return null;
  }
}

module.exports = { lockDirectory, withProject };
