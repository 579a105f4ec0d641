import { mkdirSync, renameSync, rmSync, utimesSync, writeFileSync } from "node:fs";
import path from "node:path";

import { contentStamp } from "../../scripts/lib/stamp";

import { temporaryFolder } from "./support";

describe("contentStamp", () => {
  const folder = temporaryFolder();
  const file = path.join(folder, "sub", "a.ts");

  beforeEach(() => {
    rmSync(path.dirname(file), { recursive: true, force: true });
    mkdirSync(path.dirname(file));
    writeFileSync(file, "one");
  });

  it("ignores times", () => {
    const before = contentStamp([folder]);
    utimesSync(file, 1, 1);
    expect(contentStamp([folder])).toBe(before);
  });

  it("changes with content, with names, with additions and with removals", () => {
    const stamps = [contentStamp([folder])];
    writeFileSync(file, "two");
    stamps.push(contentStamp([folder]));
    renameSync(file, path.join(folder, "sub", "b.ts"));
    stamps.push(contentStamp([folder]));
    writeFileSync(file, "two");
    stamps.push(contentStamp([folder]));
    rmSync(path.dirname(file), { recursive: true });
    stamps.push(contentStamp([folder]));
    expect(new Set(stamps).size).toBe(5);
  });

  it("takes places that do not exist as empty", () => {
    expect(contentStamp([path.join(folder, "none")])).toBe(contentStamp([]));
  });
});
