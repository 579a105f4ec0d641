import { spawnSync } from "node:child_process";

import { ROOT } from "./support";

interface Case {
  file: string;
  target: string;
}

/** What the linter says about each file if it held that import; one process, since ESLint starts slowly. */
function lint(cases: readonly Case[]): string[] {
  const script = `
    const { ESLint } = require("eslint");
    const lint = ({ file, target }) =>
      new ESLint().lintText('import * as x from "' + target + '";\\n\\nexport default x;\\n', { filePath: file });
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

let said: string[];

beforeAll(() => {
  said = lint([...WRONG, ...RIGHT].map(([file, target]) => ({ file, target })));
}, 180_000);

it.each(WRONG.map((row, i) => [...row, i] as const))(
  "%s may not import %s, and is told: %s",
  (_file, _target, wayOut, i) => {
    expect(said[i]).toMatch(new RegExp(`no-restricted-paths: .*${wayOut}`));
  },
);

it.each(RIGHT.map((row, i) => [...row, i] as const))("%s may import %s", (_file, _target, i) => {
  expect(said[WRONG.length + i]).not.toContain("no-restricted-paths");
});
