"use strict";
const fs = require("node:fs");
const path = require("node:path");
const { promisify } = require("node:util");
const zlib = require("node:zlib");

const { PlainFailure } = require("./failure");
const { CACHE, fromRoot } = require("./paths");
const { run } = require("./processes");
const { contentStamp } = require("./stamp");
const { step } = require("./steps");

const SERVER_SOURCES = ["server", "shared", ".swcrc", "package-lock.json"];
const CLIENT_SOURCES = [
  ...["app", "src", "shared", "graphql", "assets", "public", "app.json", "babel.config.js"],
  ...["metro.config.js", "tsconfig.json", "package-lock.json"],
];

const COMPRESSIBLE = new Set([".js", ".css", ".html", ".json", ".svg", ".txt", ".map", ".ico"]);

/** Compiles server/ and shared/ into build/, unless their content is what build/ was made from. */
async function buildServer(log) {
  await rebuild("build", SERVER_SOURCES, "server compiled", async (target) => {
    const swc = fromRoot("node_modules/@swc/cli/bin/swc.js");
    await run(process.execPath, [swc, "server", "shared", "-d", target, "--copy-files"], {
      sentence: "The server's sources do not compile.",
      log,
    });
  });
}

/** Exports and compresses the web client into dist/, unless its sources are unchanged. */
async function buildClient(log) {
  await rebuild("dist", CLIENT_SOURCES, "web client exported and compressed", async (target) => {
    const caches = path.join(CACHE, "metro");
    fs.mkdirSync(caches, { recursive: true });
    const expo = fromRoot("node_modules/expo/bin/cli");
    const env = {
      ...process.env,
      EXPO_OFFLINE: "1",
      EXPO_NO_TELEMETRY: "1",
      CI: "1",
      NODE_ENV: "production",
      TMPDIR: caches, // Metro keeps its caches in the temp folder
    };
    const { code, output } = await outcome(
      run(process.execPath, [expo, "export", "-p", "web", "--output-dir", target], {
        env,
        log,
        allowFailure: true,
      }),
    );
    if (code !== 0 || !fs.existsSync(path.join(target, "index.html")))
      throw new PlainFailure("Expo could not export the web client; its own words follow.", {
        output,
      });
    await compressFolder(target);
  });
}

/** run() gives the bare output on success. */
async function outcome(running) {
  const result = await running;
  return typeof result === "string" ? { code: 0, output: result } : result;
}

/**
 * Makes a folder anew when its sources changed. The new one is made aside and then takes
 * the place of the old one, so that an interrupted build leaves the old one whole.
 */
async function rebuild(name, sources, label, make) {
  const target = fromRoot(name);
  const stampFile = path.join(target, ".stamp");
  const stamp = contentStamp(sources);
  try {
    if (fs.readFileSync(stampFile, "utf8") === stamp) return;
  } catch {
    // Never built, or not to its end.
  }
  await step(label, async () => {
    const fresh = path.join(CACHE, `${name}-new`);
    const old = path.join(CACHE, `${name}-old`);
    fs.rmSync(fresh, { recursive: true, force: true });
    fs.mkdirSync(fresh, { recursive: true });
    await make(fresh);
    fs.writeFileSync(path.join(fresh, ".stamp"), stamp);
    fs.rmSync(old, { recursive: true, force: true });
    if (fs.existsSync(target)) move(target, old);
    move(fresh, target);
    fs.rmSync(old, { recursive: true, force: true });
  });
}

/** Renames a folder; where the file system can't (another disk, a layer of a container), copies it. */
function move(from, to) {
  try {
    fs.renameSync(from, to);
  } catch (error) {
    if (error.code !== "EXDEV") throw error;
    fs.cpSync(from, to, { recursive: true });
    fs.rmSync(from, { recursive: true, force: true });
  }
}

/** Writes a Brotli and a gzip copy beside each text file, for the server to hand out as they are. */
async function compressFolder(folder) {
  const brotli = promisify(zlib.brotliCompress);
  const gzip = promisify(zlib.gzip);
  const files = fs
    .readdirSync(folder, { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && COMPRESSIBLE.has(path.extname(entry.name)))
    .map((entry) => path.join(entry.parentPath ?? entry.path, entry.name));
  await Promise.all(
    files.map(async (file) => {
      const content = fs.readFileSync(file);
      if (content.length < 500) return;
      const params = {
        [zlib.constants.BROTLI_PARAM_QUALITY]: 11,
        [zlib.constants.BROTLI_PARAM_SIZE_HINT]: content.length,
      };
      fs.writeFileSync(`${file}.br`, await brotli(content, { params }));
      fs.writeFileSync(`${file}.gz`, await gzip(content, { level: 9 }));
    }),
  );
}

module.exports = { buildServer, buildClient, compressFolder };
