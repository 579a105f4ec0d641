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

it("the import directions are lint errors that tell the way out", () => {
  const wrong = [
    ["shared/review/x.ts", "~server/config/config", "pass the value in instead"],
    ["src/components/X.tsx", "~server/config/config", "only through graphql/"],
    ["server/common/x.ts", "@/layout/Screen", "imports shared/ only"],
    ["src/features/account/X.tsx", "@/features/history/HistoryScreen", "move what both need"],
    ["shared/statement/x.ts", "~shared/review/states", "move the common part down"],
  ] as const;
  const said = lint(wrong.map(([file, target]) => ({ file, target })));
  expect(said).toEqual(
    wrong.map(([, , wayOut]) =>
      expect.stringMatching(new RegExp(`no-restricted-paths: .*${wayOut}`)),
    ),
  );
}, 120_000);

it("server may import shared, and src graphql and shared", () => {
  const said = lint([
    { file: "server/common/x.ts", target: "~shared/review/states" },
    { file: "src/components/X.tsx", target: "~graphql/generated/graphql" },
    { file: "src/components/X.tsx", target: "~shared/review/states" },
  ]);
  expect(said.join()).not.toContain("no-restricted-paths");
}, 120_000);
