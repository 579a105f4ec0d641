import { spawnSync } from "node:child_process";

import { ROOT } from "./support";

interface Case {
  file: string;
  code: string;
}

/** What the linter says about each file if it held that code; one process, since ESLint starts slowly. */
function lint(cases: readonly Case[]): string[] {
  const script = `
    const { ESLint } = require("eslint");
    const lint = ({ file, code }) => new ESLint().lintText(code, { filePath: file });
    Promise.all(JSON.parse(process.argv[1]).map(lint)).then((results) =>
      process.stdout.write(JSON.stringify(results.map(([result]) =>
        result.messages.map(({ ruleId, message }) => ruleId + ": " + message).join("\\n")))));
  `;
  const { stdout, stderr } = spawnSync(process.execPath, ["-e", script, JSON.stringify(cases)], {
    cwd: ROOT,
    encoding: "utf8",
  });
  if (stdout === "") throw new Error(stderr);
  return JSON.parse(stdout);
}

const WRONG = [
  ["shared/review/x.ts", "~server/config/config", "pass the value in instead"],
  ["src/components/X.tsx", "~server/config/config", "only through graphql/"],
  ["server/common/x.ts", "@/layout/Screen", "imports shared/ only"],
  ["src/features/account/X.tsx", "@/features/history/HistoryScreen", "move what both need"],
  ["shared/statement/x.ts", "~shared/review/states", "move the common part down"],
] as const;
const RIGHT = [
  ["server/common/x.ts", "~shared/review/states"],
  ["src/components/X.tsx", "~graphql/generated/graphql"],
  ["src/components/X.tsx", "~shared/review/states"],
] as const;

/** Lines that would make shared/ depend on more than its arguments, and the rule that stops each. */
const PLANTED = [
  ["const now = Date.now();", "no-restricted-properties"],
  ["const now = new Date();", "no-restricted-syntax"],
  ["const now = Date();", "no-restricted-syntax"],
  ["const now = performance.now();", "no-restricted-globals"],
  ["const chance = Math.random();", "no-restricted-properties"],
  ["const { random } = Math;", "no-restricted-properties"],
  ["const id = crypto.randomUUID();", "no-restricted-globals"],
  ["const home = process.env.HOME;", "no-restricted-globals"],
  ["const home = globalThis.process;", "no-restricted-globals"],
  ["setTimeout(() => undefined, 1);", "no-restricted-globals"],
  ["queueMicrotask(() => undefined);", "no-restricted-globals"],
  ["const page = fetch('/');", "no-restricted-globals"],
  ["const text = (1.5).toLocaleString();", "no-restricted-properties"],
  ["const lazy = import('./fields');", "no-restricted-syntax"],
  ["const fs = require('fs');", "no-restricted-globals"],
  ["import fs from 'node:fs';", "no-restricted-imports"],
  ["import os from 'os';", "no-restricted-imports"],
  ["import { useMemo } from 'react';", "no-restricted-imports"],
  ["import { Entity } from 'typeorm';", "no-restricted-imports"],
  ["import { Screen } from '@/layout/Screen';", "no-restricted-imports"],
] as const;
/** The same with everything given. */
const GIVEN = "export const yearOf = (at: Date) => new Date(at.getTime()).getUTCFullYear();\n";

let said: string[];
let saidOfPlanted: string[];
let saidOfGiven: string;

beforeAll(() => {
  const all = lint([
    ...[...WRONG, ...RIGHT].map(([file, target]) => ({
      file,
      code: `import * as x from "${target}";\n\nexport default x;\n`,
    })),
    ...PLANTED.map(([code]) => ({ file: "shared/statement/x.ts", code })),
    { file: "shared/statement/x.ts", code: GIVEN },
  ]);
  said = all.slice(0, WRONG.length + RIGHT.length);
  saidOfPlanted = all.slice(said.length, -1);
  saidOfGiven = all.at(-1)!;
}, 180_000);

it.each(PLANTED.map((row, i) => [...row, i] as const))(
  "shared may not hold %s: %s",
  (_code, rule, i) => {
    expect(saidOfPlanted[i]).toContain(`${rule}: `);
  },
);

it("shared may hold what depends on its arguments only", () => {
  expect(saidOfGiven).toBe("");
});

it.each(WRONG.map((row, i) => [...row, i] as const))(
  "%s may not import %s, and is told: %s",
  (_file, _target, wayOut, i) => {
    expect(said[i]).toMatch(new RegExp(`no-restricted-paths: .*${wayOut}`));
  },
);

it.each(RIGHT.map((row, i) => [...row, i] as const))("%s may import %s", (_file, _target, i) => {
  expect(said[WRONG.length + i]).not.toContain("no-restricted-paths");
});
