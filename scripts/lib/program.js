"use strict";
const { Interrupted, explain } = require("./failure");
const { isStopping, stopEverything, stopOnSignals } = require("./processes");

/**
 * Runs a command of ours to its end: stops what it started, however it ends, and says a
 * failure in one sentence.
 *
 * @param main - The work; gets a status it may fill: `serving`, `log`.
 * @param options.exitCode - Exit code after a signal, by whether it was serving.
 * @param options.atLast - Called as the very last thing before the end, with the exit code.
 */
function program(main, { exitCode = (_serving, number) => number, atLast = () => {} } = {}) {
  const status = { serving: false, log: null };
  stopOnSignals((_signal, number) => {
    const code = exitCode(status.serving, number);
    if (status.serving) process.stdout.write("Stopped.\n");
    else process.stderr.write("Stopped before the end.\n");
    atLast(code);
    return code;
  });
  const finish = async (code) => {
    const bySignal = isStopping();
    await stopEverything();
    if (bySignal) return; // the signal's own handler ends the program
    atLast(code);
    process.exit(code);
  };
  Promise.resolve()
    .then(() => main(status))
    .then((code) => finish(code ?? 0))
    .catch(async (error) => {
      if (error instanceof Interrupted || isStopping()) return finish(1);
      const { sentence, details } = explain(error);
      if (details) process.stderr.write(`${details.replace(/^/gm, "    ")}\n`);
      process.stderr.write(`${sentence}\n`);
      if (process.env.LOG_LEVEL === "debug") process.stderr.write(`${error.stack}\n`);
      return finish(1);
    });
}

module.exports = { program };
