"use strict";
const { spawn } = require("node:child_process");
const fs = require("node:fs");

const { Interrupted, PlainFailure } = require("./failure");
const { ROOT } = require("./paths");

/** Every child that still runs; each leads a process group of its own, so that its children go with it. */
const children = new Set();
/** What to undo at the end, last first. */
const undo = [];
const stopListeners = new Set();
let stopping = null;

function signalGroup(pid, signal) {
  try {
    process.kill(-pid, signal);
  } catch {
    // The group is gone already.
  }
}

/**
 * Starts a child in its own process group: a Ctrl-C in the terminal reaches only this
 * program, which then stops its children in order.
 */
function startChild(command, args, { env = process.env, stdio, cwd = ROOT } = {}) {
  if (stopping) throw new Interrupted();
  const child = spawn(command, args, {
    cwd,
    env,
    stdio: stdio ?? ["ignore", "pipe", "pipe"],
    detached: true,
  });
  child.ended = new Promise((resolve) => {
    child.once("error", (error) => resolve({ code: null, signal: null, error }));
    child.once("close", (code, signal) => resolve({ code, signal, error: null }));
  });
  if (child.pid !== undefined) children.add(child);
  child.ended.then(() => children.delete(child));
  return child;
}

/** Ends a child and all it started: politely first, by force after the grace time. */
async function endChild(child, { graceMs = 8000, signal = "SIGTERM" } = {}) {
  if (child.pid === undefined || !children.has(child)) return;
  signalGroup(child.pid, signal);
  const timer = setTimeout(() => signalGroup(child.pid, "SIGKILL"), graceMs);
  await child.ended;
  clearTimeout(timer);
  signalGroup(child.pid, "SIGKILL"); // grandchildren that outlived their parent
}

/**
 * Runs a tool to its end and returns its output.
 *
 * @throws {PlainFailure} With `sentence` and the tool's last words, if it fails.
 */
async function run(command, args, options = {}) {
  const { sentence, env, input, log, show = false, stdio, cwd } = options;
  const child = startChild(command, args, {
    env,
    cwd,
    stdio: stdio ?? [input === undefined ? "ignore" : "pipe", "pipe", "pipe"],
  });
  const forget = atEnd(() => endChild(child));
  let output = "";
  const hear = (target) => (chunk) => {
    output = (output + chunk).slice(-400_000);
    if (log) fs.appendFileSync(log, chunk);
    if (show) target.write(chunk);
  };
  child.stdout?.setEncoding("utf8").on("data", hear(process.stdout));
  child.stderr?.setEncoding("utf8").on("data", hear(process.stderr));
  if (input !== undefined) {
    child.stdin.on("error", () => {}); // the exit code tells more than a broken pipe
    child.stdin.end(input);
  }
  const { code, error } = await child.ended;
  forget();
  if (stopping) throw new Interrupted();
  if (code === 0) return output;
  if (options.allowFailure) return { code: code ?? 1, output };
  throw new PlainFailure(sentence ?? `${command} failed.`, {
    output: error ? `${command}: ${error.message}` : output,
  });
}

/** Registers something to undo when the program ends, however it ends. */
function atEnd(action) {
  undo.push(action);
  return () => {
    const place = undo.indexOf(action);
    if (place >= 0) undo.splice(place, 1);
  };
}

/** Stops everything this program started, last first; a second call waits for the first. */
function stopEverything() {
  stopping ??= (async () => {
    for (const listener of stopListeners) listener();
    while (undo.length > 0) {
      try {
        await undo.pop()();
      } catch (error) {
        process.stderr.write(`While stopping: ${error.message}\n`);
      }
    }
    await Promise.all([...children].map((child) => endChild(child)));
  })();
  return stopping;
}

function isStopping() {
  return stopping !== null;
}

/**
 * Ctrl-C, SIGTERM or a closed terminal stop everything, then end the program.
 *
 * @param exitCode - Called when all is stopped, with the signal and its usual code; gives the code to end with.
 */
function stopOnSignals(exitCode) {
  let count = 0;
  const numbers = { SIGHUP: 129, SIGINT: 130, SIGTERM: 143 };
  for (const signal of Object.keys(numbers))
    process.on(signal, () => {
      count += 1;
      // npm passes on the Ctrl-C that the terminal has sent here too: only an insistent person forces the end.
      if (count > 3) for (const child of children) signalGroup(child.pid, "SIGKILL");
      if (count > 1) return;
      stopEverything().then(() => process.exit(exitCode(signal, numbers[signal])));
    });
  process.stdout.on("error", () => process.kill(process.pid, "SIGTERM"));
  process.stderr.on("error", () => {});
  process.on("exit", () => {
    for (const child of children) signalGroup(child.pid, "SIGTERM");
  });
}

/** Waits; rejects at once when the program is asked to stop. */
function pause(ms) {
  return new Promise((resolve, reject) => {
    if (stopping) return reject(new Interrupted());
    const interrupt = () => {
      clearTimeout(timer);
      reject(new Interrupted());
    };
    const timer = setTimeout(() => {
      stopListeners.delete(interrupt);
      resolve();
    }, ms);
    stopListeners.add(interrupt);
  });
}

function isAlive(pid) {
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return error.code === "EPERM";
  }
}

module.exports = {
  startChild,
  endChild,
  run,
  atEnd,
  stopEverything,
  isStopping,
  stopOnSignals,
  pause,
  isAlive,
};
