"use strict";
const fs = require("node:fs");
const http = require("node:http");
const net = require("node:net");

const { PlainFailure, lastWords } = require("./failure");
const { fromRoot } = require("./paths");
const { atEnd, endChild, pause, run, startChild } = require("./processes");

/** What every part of the program gets to know; the password travels in the environment only. */
function serverEnvironment(databaseUrl, port, extra = {}) {
  const inherited = { ...process.env };
  // The running server never learns of the user that owns the schema.
  delete inherited.DATABASE_OWNER_URL;
  return {
    ...inherited,
    NODE_ENV: "production",
    DATABASE_URL: databaseUrl,
    PORT: String(port),
    WEB_ROOT: fromRoot("dist"),
    ...extra,
  };
}

/**
 * Migrates, gives the running server's database user its rights, and seeds an empty database
 * unless DEMO=0.
 *
 * @param environment - That of the running server.
 * @param ownerUrl - Address of the database for the user that owns the schema.
 */
async function prepareDatabase(environment, log, ownerUrl = environment.DATABASE_URL) {
  const result = await run(process.execPath, [fromRoot("scripts/tasks/prepareDatabase.js")], {
    env: {
      ...environment,
      DATABASE_URL: ownerUrl,
      APPLICATION_DATABASE_URL: environment.DATABASE_URL,
    },
    log,
    allowFailure: true,
  });
  if (typeof result !== "string") {
    const said = lastWords(result.output).split("\n");
    throw new PlainFailure(said.pop() || "The database could not be prepared.", {
      output: result.output,
      details: said.join("\n"),
    });
  }
  return JSON.parse(result.trim().split("\n").pop());
}

/** The port as a number. @throws {PlainFailure} If it is none. */
function readPort(text) {
  const port = Number(text);
  if (Number.isInteger(port) && port > 0 && port < 65_536) return port;
  throw new PlainFailure(`PORT must be a whole number from 1 to 65535, not "${text}".`);
}

/** @throws {PlainFailure} If something listens there already. */
async function requireFreePort(port, host = "127.0.0.1") {
  await new Promise((resolve, reject) => {
    const probe = net.createServer();
    probe.once("error", (error) => reject(portFailure(error, port, host)));
    probe.listen({ port, host, exclusive: true }, () => probe.close(resolve));
  });
}

function portFailure(error, port, host) {
  if (error.code === "EADDRINUSE")
    return new PlainFailure(
      `Port ${port} is taken by another program. Stop that program, or choose another port: ` +
        `PORT=${port + 1} npm start`,
    );
  if (error.code === "EACCES")
    return new PlainFailure(
      `This user may not open port ${port}. Choose one above 1023 with PORT.`,
    );
  return new PlainFailure(`The address ${host}:${port} can't be opened (${error.code}).`);
}

/**
 * Starts the compiled server and waits until it is ready.
 *
 * @param options.log - File that takes its output; `echo` also shows it here.
 * @returns {Promise<{ child: import("node:child_process").ChildProcess & { ended: Promise<any> }, url: string, stop: () => Promise<void> }>}
 */
async function launchServer(environment, { log, echo = false }) {
  const port = Number(environment.PORT);
  const args = ["-r", fromRoot("scripts/tasks/followParent.js"), fromRoot("build/server/index.js")];
  const child = startChild(process.execPath, args, {
    env: environment,
    stdio: ["ignore", "pipe", "pipe", "ipc"],
  });
  let said = "";
  let ready = false;
  const sink = fs.createWriteStream(log, { flags: "a", mode: 0o600 });
  sink.on("error", () => {}); // a full disk must not take the server down
  for (const stream of [child.stdout, child.stderr])
    stream.on("data", (chunk) => {
      if (!ready) said = (said + chunk).slice(-20_000);
      sink.write(chunk);
      if (echo) process.stdout.write(chunk);
    });
  let end = null;
  child.ended.then((how) => {
    end = how;
    sink.end();
  });
  const stop = () => endChild(child, { graceMs: 10_000 });
  const forget = atEnd(stop);
  const url = `http://127.0.0.1:${port}`;
  const deadline = Date.now() + 60_000;
  while (!(await isReady(`${url}/readyz`))) {
    if (end !== null || Date.now() > deadline) {
      await stop();
      throw new PlainFailure(
        end === null
          ? "The server did not become ready within a minute; its own words follow."
          : "The server ended while starting; its own words follow.",
        { output: said },
      );
    }
    await pause(100);
  }
  ready = true;
  return {
    child,
    url,
    async stop() {
      forget();
      await stop();
    },
  };
}

function isReady(url) {
  return new Promise((resolve) => {
    http
      .get(url, { timeout: 2000, agent: false }, (response) => {
        response.resume();
        resolve(response.statusCode === 200);
      })
      .on("timeout", function () {
        this.destroy();
      })
      .on("error", () => resolve(false));
  });
}

module.exports = {
  serverEnvironment,
  prepareDatabase,
  readPort,
  requireFreePort,
  launchServer,
};
