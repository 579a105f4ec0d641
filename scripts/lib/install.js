"use strict";
const fs = require("node:fs");
const path = require("node:path");

const { PlainFailure } = require("./failure");
const { ROOT, fromRoot } = require("./paths");
const { run } = require("./processes");
const { contentStamp } = require("./stamp");
const { step } = require("./steps");

/** Folders of programs; /usr/sbin is often missing from a plain user's PATH. */
const PROGRAM_FOLDERS = [...(process.env.PATH ?? "").split(":"), "/usr/sbin", "/usr/bin", "/sbin"];

function findProgram(...names) {
  for (const name of names)
    for (const folder of PROGRAM_FOLDERS) {
      const file = path.join(folder || ".", name);
      try {
        fs.accessSync(file, fs.constants.X_OK);
        if (fs.statSync(file).isFile()) return file;
      } catch {
        // Not in this folder.
      }
    }
  return null;
}

const MARIADB_SERVER = {
  title: "MariaDB's server",
  programs: ["mariadbd", "mariadb-install-db", "mariadb", "mariadb-dump"],
  packages: ["mariadb-server-core", "mariadb-client-core", "mariadb-client"],
};
const MARIADB_CLIENT = {
  title: "MariaDB's client programs",
  programs: ["mariadb", "mariadb-dump"],
  packages: ["mariadb-client-core", "mariadb-client"],
};
/** Readers of the field, run over what is handed out: astropy, the VOTable checker, LaTeX. */
const READERS = {
  title: "The readers of tables",
  programs: ["stilts", "latex", "bibtex"],
  files: [
    "/usr/lib/python3/dist-packages/astropy",
    "/usr/share/texlive/texmf-dist/tex/latex/booktabs/booktabs.sty",
  ],
  packages: [
    "python3-astropy",
    "stilts",
    "texlive-binaries",
    "texlive-latex-base",
    "texlive-latex-recommended",
  ],
};
const CHROMIUM = { title: "Chromium", programs: ["chromium"], packages: ["chromium"] };

/**
 * Installs Debian packages when one of their programs is missing. None of them starts a service.
 *
 * @throws {PlainFailure} Without the right to install, or when apt-get fails.
 */
async function ensurePrograms({ title, programs, files = [], packages }, log) {
  const missing = () => [
    ...programs.filter((name) => findProgram(name) === null),
    ...files.filter((file) => !fs.existsSync(file)),
  ];
  if (missing().length === 0) return;
  await step(`${title} installed from Debian (${packages.join(", ")})`, async () => {
    const [apt, asRoot] = installer(title, packages);
    const environment = ["DEBIAN_FRONTEND=noninteractive", "LC_ALL=C.UTF-8"];
    // sudo may have to ask for the password, so it keeps the terminal.
    const stdio =
      asRoot.length > 0 && process.stdin.isTTY ? ["inherit", "pipe", "pipe"] : undefined;
    const aptGet = (args, sentence, allowFailure) =>
      run(
        asRoot[0] ?? "env",
        [...asRoot.slice(1), ...(asRoot.length ? ["env"] : []), ...environment, apt, ...args],
        {
          sentence,
          log,
          stdio,
          allowFailure,
        },
      );
    // A failed update may leave lists that still serve; the install then tells.
    await aptGet(["-q", "update"], "", true);
    await aptGet(
      ["-q", "-y", "-o", "Dpkg::Use-Pty=0", "install", "--no-install-recommends", ...packages],
      `Debian's package manager could not install ${packages.join(", ")}. ` +
        "Check the network and the package sources, then run the command again.",
    );
    const still = missing();
    if (still.length > 0)
      throw new PlainFailure(
        `${title}: ${still.join(", ")} is missing even after the installation.`,
      );
  });
}

/** apt-get and what must stand before it to run as root. */
function installer(title, packages) {
  const apt = findProgram("apt-get");
  const by = `apt-get install ${packages.join(" ")}`;
  if (apt === null)
    throw new PlainFailure(
      `${title} is missing and this system has no apt-get. Install it by the system's own means, ` +
        "or set DATABASE_URL to a MariaDB that runs elsewhere.",
    );
  if (process.getuid?.() === 0) return [apt, []];
  const sudo = findProgram("sudo");
  if (sudo === null)
    throw new PlainFailure(
      `${title} is missing, and this user may not install it: neither root nor sudo. ` +
        `Ask an administrator to run: ${by}`,
    );
  return [apt, process.stdin.isTTY ? [sudo] : [sudo, "-n"]];
}

const LOCKFILE = fromRoot("package-lock.json");
const MODULES = fromRoot("node_modules");
const MODULES_STAMP = path.join(MODULES, ".fogline-stamp");

function modulesAreCurrent() {
  const installed = path.join(MODULES, ".package-lock.json"); // npm writes it last
  if (!fs.existsSync(installed)) return false;
  try {
    if (fs.readFileSync(MODULES_STAMP, "utf8") === contentStamp([LOCKFILE])) return true;
  } catch {
    // Installed by hand: the clock has to tell.
  }
  return fs.statSync(installed).mtimeMs >= fs.statSync(LOCKFILE).mtimeMs;
}

async function ensureModules(log) {
  if (modulesAreCurrent()) return;
  await step("npm packages installed (npm ci)", async () => {
    const npm = process.env.npm_execpath;
    const viaNode = npm !== undefined && /npm-cli\.c?js$/.test(npm) && fs.existsSync(npm);
    const [command, first] = viaNode ? [process.execPath, [npm]] : ["npm", []];
    await run(command, [...first, "ci", "--include=dev", "--no-audit", "--no-fund"], {
      cwd: ROOT,
      sentence:
        "npm ci could not install the packages. Check the network, then run the command again.",
      log,
    });
    fs.writeFileSync(MODULES_STAMP, contentStamp([LOCKFILE]));
  });
}

/**
 * Refuses to begin with too little room.
 *
 * @throws {PlainFailure} If the disk of `folder` has less than `megabytes` free.
 */
function requireSpace(folder, megabytes) {
  let place = folder;
  while (!fs.existsSync(place)) place = path.dirname(place);
  const { bavail, bsize } = fs.statfsSync(place);
  const free = Math.floor((bavail * bsize) / 1024 ** 2);
  if (free >= megabytes) return;
  throw new PlainFailure(
    `The disk is full: ${free} MB are free for ${place}, and Fogline needs about ${megabytes} MB now. ` +
      "Free some space and run the command again.",
  );
}

function spaceNeeded({ database }) {
  const modules = modulesAreCurrent() ? 0 : 1600;
  return modules + (database ? 300 : 0) + 200;
}

module.exports = {
  findProgram,
  ensurePrograms,
  ensureModules,
  requireSpace,
  spaceNeeded,
  MARIADB_SERVER,
  MARIADB_CLIENT,
  READERS,
  CHROMIUM,
};
