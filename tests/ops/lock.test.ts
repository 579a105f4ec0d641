import { readFileSync } from "node:fs";
import path from "node:path";

import { ROOT, background, command, temporaryFolder } from "./support";

const folder = temporaryFolder();
const holder = `
  require(${JSON.stringify(path.join(ROOT, "scripts/lib/lock"))})
    .lockDirectory(${JSON.stringify(folder)}, "running")
    .then(() => { console.log("held"); setInterval(() => {}, 1000); });
`;
const start = () => command("start.js", [], { FOGLINE_DATA: folder, PORT: "1" });

it("a second start on the same data folder is refused, naming the first", async () => {
  const first = await background(holder);
  try {
    const second = start();
    expect(second.code).toBe(1);
    expect(second.output).toContain(
      `Fogline is already running with this data folder (process ${first.pid}).`,
    );
  } finally {
    first.end();
  }
});

it("a start that was killed holds nothing", async () => {
  const first = await background(holder);
  first.end();
  // The helper that keeps the lock ends with the pipe of the killed process.
  const next = await background(holder);
  expect(JSON.parse(readFileSync(path.join(folder, "owner.json"), "utf8")).pid).toBe(next.pid);
  next.end();
});
