import { spawn, type ChildProcess } from "node:child_process";
import { createServer, type Server } from "node:http";
import type { AddressInfo } from "node:net";
import path from "node:path";

import { createTestDatabase } from "../support/harness";

const ROOT = path.join(__dirname, "../../..");
const WEB_ROOT = path.join(__dirname, "../support/web");

let database: Awaited<ReturnType<typeof createTestDatabase>>;
const children: ChildProcess[] = [];
beforeAll(async () => {
  database = await createTestDatabase();
});
afterAll(async () => {
  for (const child of children) if (child.exitCode === null) child.kill("SIGKILL");
  await database.drop();
});

function launch(env: Record<string, string>) {
  const child = spawn(process.execPath, ["-r", "@swc-node/register", "server/index.ts"], {
    cwd: ROOT,
    env: { PATH: process.env.PATH ?? "", NODE_ENV: "production", WEB_ROOT, ...env },
  });
  children.push(child);
  let output = "";
  for (const stream of [child.stdout, child.stderr]) {
    stream.on("data", (chunk: Buffer) => {
      output += chunk.toString("utf8");
    });
  }
  const ended = new Promise<number | null>((resolve) => child.on("close", resolve));
  const said = async (text: string): Promise<void> => {
    while (!output.includes(text)) {
      if (child.exitCode !== null) throw new Error(`ended before "${text}": ${output}`);
      await new Promise((resolve) => setTimeout(resolve, 50));
    }
  };
  return { child, ended, said, output: () => output };
}

async function taken(): Promise<{ server: Server; port: number }> {
  const server = createServer();
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
  return { server, port: (server.address() as AddressInfo).port };
}

it.each(["SIGTERM", "SIGINT"] as const)(
  "serves until %s, then finishes and ends without an error",
  async (signal) => {
    const { server, port } = await taken();
    await new Promise((resolve) => server.close(resolve));
    const run = launch({ DATABASE_URL: database.url, PORT: String(port) });
    await run.said("listening");
    const answer = await fetch(`http://127.0.0.1:${port}/readyz`);
    expect(await answer.json()).toEqual({ status: "ready" });
    run.child.kill(signal);
    expect(await run.ended).toBe(0);
    await expect(fetch(`http://127.0.0.1:${port}/healthz`)).rejects.toThrow();
  },
);

it("a port that is taken is said in a sentence, with an exit code", async () => {
  const { server, port } = await taken();
  try {
    const run = launch({ DATABASE_URL: database.url, PORT: String(port) });
    expect(await run.ended).toBe(1);
    expect(run.output()).toContain(`Port ${port} is taken by another program`);
    expect(run.output()).not.toMatch(/\n\s+at /);
  } finally {
    server.close();
  }
});

it.each([
  [
    "a database that can't be reached",
    { DATABASE_URL: "mysql://a:b@127.0.0.1:1/fogline" },
    /can't be reached/,
  ],
  ["an environment that is malformed", { DATABASE_URL: "nonsense" }, /DATABASE_URL must read/],
  [
    "a client that is not exported",
    { DATABASE_URL: "mysql://a:b@127.0.0.1:1/fogline", WEB_ROOT: "/nowhere" },
    /not exported/,
  ],
])("%s is said in a sentence, with an exit code", async (_what, env, sentence) => {
  const run = launch(env);
  expect(await run.ended).toBe(1);
  expect(run.output()).toMatch(sentence);
  expect(run.output().trim().split("\n").length).toBeLessThanOrEqual(2);
});
