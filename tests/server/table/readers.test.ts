import "reflect-metadata";

import { execFileSync } from "node:child_process";
import fs from "node:fs";
import os from "node:os";
import path from "node:path";

import { Release } from "~server/release/release.entity";
import { seedDemonstration } from "~server/seed/demonstration";
import { follow } from "~server/table/settle.service";
import { TableVersionRow, type TableVersion } from "~server/table/tableVersion.entity";
import { saveRecipe } from "~server/table/version.service";
import { ascii } from "~shared/formats/columnFile/ascii";
import { oneLine, type FileCell, type FileColumn } from "~shared/formats/columnFile/columnFile";
import { NO_CHOICES, takeProposal } from "~shared/table/decision";

import { actingAs, granted } from "../../factories/constraint";
import { startTestServer, type TestServer } from "../support/harness";

/** Debian's packages hold the readers for its own interpreter. */
const PYTHON = "/usr/bin/python3";
/** Milliseconds after which a reader that waits for somebody has failed. */
const PATIENCE = 60_000;
const FILES = ["json", "csv", "ecsv", "vot", "txt", "tex", "bib", "methods.tex"];

/**
 * A table over all of the invented demonstration, which holds every kind of statement, read by the programs that
 * the field uses: astropy, the VOTable checker of STILTS, LaTeX and BibTeX, as Debian packages them.
 */
describe("readers of the field", () => {
  let server: TestServer;
  let folder: string;
  let version: TableVersion;
  let rows: TableVersionRow[];

  beforeAll(async () => {
    folder = fs.mkdtempSync(path.join(os.tmpdir(), "fogline-readers-"));
    server = await startTestServer();
    await seedDemonstration(server.dataSource, server.config.passwordCost);
    const { manager } = server.dataSource;
    const maintainer = await server.signedIn(["maintainer"]);
    const who = actingAs(server.dataSource, maintainer.user);
    // The story ends with a release of all of it.
    const [{ number: release }] = (await manager.find(Release, {
      order: { number: "DESC" },
      take: 1,
    })) as [Release];
    const recipe = { release, filter: {}, choices: NO_CHOICES };
    let decisions = granted(await follow(manager, null, recipe)).settled.decisions.map(
      takeProposal,
    );
    // Taking one proposal can bring the next question up.
    for (let round = 0; round < 5; round += 1) {
      const { settled } = granted(
        await follow(manager, null, { ...recipe, choices: { ...NO_CHOICES, decisions } }),
      );
      if (settled.open === 0) break;
      decisions = settled.decisions.map(takeProposal);
    }
    version = granted(
      await saveRecipe(who, {
        name: "All & everything, 100 %",
        visibility: "public",
        recipe: {
          release,
          filter: {},
          decisions: decisions.map(({ id, option }) => ({ id, option, byDefault: true })),
        },
      }),
    );
    rows = await manager.find(TableVersionRow, {
      where: { slug: version.slug, included: true },
      order: { position: "ASC" },
    });
    for (const kind of FILES) {
      const { body } = await server
        .agent()
        .get(`/api/tables/${version.slug}.${kind}`)
        .buffer(true)
        .parse((res, done) => {
          const parts: Buffer[] = [];
          res.on("data", (part: Buffer | string) => parts.push(Buffer.from(part)));
          res.on("end", () => done(null, Buffer.concat(parts)));
        })
        .expect(200);
      fs.writeFileSync(path.join(folder, `table.${kind}`), body as Buffer);
    }
  });
  afterAll(async () => {
    await server.stop();
    fs.rmSync(folder, { recursive: true, force: true });
  });

  it("find at least fifteen rows of many kinds in the table", () => {
    expect(rows.length).toBeGreaterThanOrEqual(15);
    const kind = version.columns.findIndex(({ name }) => name === "used_kind");
    expect(new Set(rows.map(({ cells }) => cells?.[kind])).size).toBeGreaterThanOrEqual(4);
  });

  it("accept the VOTable without an error", () => {
    const said = execFileSync("stilts", ["votlint", path.join(folder, "table.vot")], {
      encoding: "utf8",
      stdio: ["ignore", "pipe", "pipe"],
      timeout: PATIENCE,
    });
    expect(said).not.toMatch(/ERROR|WARNING/);
  });

  it("read equal values and masks from ECSV, VOTable and the machine-readable table", () => {
    const read = JSON.parse(
      execFileSync(PYTHON, [path.join(__dirname, "read_tables.py"), folder], {
        encoding: "utf8",
        timeout: PATIENCE,
      }),
    ) as Record<"ecsv" | "vot" | "txt", Record<string, FileCell[]>>;
    for (const [index, column] of version.columns.entries()) {
      const cells = rows.map(({ cells: row }) => row?.[index] ?? null);
      // A column without any cell has no type to read back in some formats.
      const plain = cells.map((cell) => asRead(cell, column));
      expect([column.name, read.ecsv[column.name]]).toEqual([column.name, plain]);
      expect([column.name, read.vot[column.name]?.map(nothingForEmpty)]).toEqual([
        column.name,
        plain,
      ]);
      const spelled = plain.map((cell) =>
        typeof cell === "string"
          ? ascii(cell).trim()
          : cell === true
            ? "yes"
            : cell === false
              ? "no"
              : cell,
      );
      expect([column.name, read.txt[column.name]?.map(nothingForEmpty)]).toEqual([
        column.name,
        spelled,
      ]);
    }
  });

  it("set the table, the methods paragraph and the bibliography without an error", () => {
    fs.writeFileSync(
      path.join(folder, "paper.tex"),
      [
        "\\documentclass{article}",
        "\\usepackage{booktabs,natbib,url}",
        "\\begin{document}",
        "\\input{table.methods.tex}",
        "\\input{table.tex}",
        "\\bibliographystyle{plainnat}",
        "\\bibliography{table}",
        "\\end{document}",
        "",
      ].join("\n"),
    );
    const latex = (): string => run("latex", "-interaction=nonstopmode", "-halt-on-error", "paper");
    latex();
    const bibtex = run("bibtex", "paper");
    expect(bibtex).not.toMatch(/error|didn't find/i);
    latex();
    const last = latex();
    expect(last).not.toMatch(/undefined|Missing character/i);
    expect(fs.statSync(path.join(folder, "paper.dvi")).size).toBeGreaterThan(1000);
  });

  it("find exactly the cited works in the bibliography", () => {
    const bib = fs.readFileSync(path.join(folder, "table.bib"), "utf8");
    const keys = [...bib.matchAll(/^@(?!preamble)\w+\{([^,]+),/gm)].map(([, key]) => key);
    const cited = new Set(rows.map(({ citationKey }) => citationKey));
    expect(new Set(keys)).toEqual(new Set([...cited, `FoglineRelease${version.releaseNumber}`]));
  });

  function run(command: string, ...args: string[]): string {
    try {
      return execFileSync(command, args, {
        cwd: folder,
        encoding: "utf8",
        stdio: "pipe",
        timeout: PATIENCE,
      });
    } catch (error) {
      throw new Error(`${command}: ${String((error as { stdout?: string }).stdout).slice(-2000)}`);
    }
  }
});

/** A cell as a reader gives it back. */
function asRead(cell: FileCell, { kind }: FileColumn): FileCell {
  if (cell === null) return null;
  if (kind === "text") return oneLine(String(cell)) || null;
  return kind === "flag" ? cell : Number(String(cell).replace("\u2212", "-"));
}

function nothingForEmpty(cell: FileCell): FileCell {
  return cell === "" ? null : cell;
}
