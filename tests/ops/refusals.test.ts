import { createServer, type AddressInfo } from "node:net";
import path from "node:path";

import { command, temporaryFolder } from "./support";

const folder = temporaryFolder();
const start = (env: Record<string, string>) =>
  command("start.js", [], { FOGLINE_DATA: path.join(folder, "data"), ...env });

describe("npm start refuses in a sentence, without a stack trace,", () => {
  it("a port that is taken", async () => {
    const other = createServer();
    await new Promise<void>((resolve) => other.listen(0, "127.0.0.1", resolve));
    const { port } = other.address() as AddressInfo;
    // The listener lives in this process, which the command must not wait for.
    const { code, output } = start({ PORT: String(port) });
    other.close();
    expect(code).toBe(1);
    expect(output).toContain(`Port ${port} is taken by another program.`);
    expect(output).not.toMatch(/^\s+at /m);
  });

  it.each(["0", "65536", "http", "-1"])("PORT=%s", (port) => {
    const { code, output } = start({ PORT: port });
    expect([code, output]).toEqual([1, expect.stringContaining("PORT must be a whole number")]);
  });

  it.each(["nonsense", "postgres://u:p@h/d", "mysql://u:p@h"])("DATABASE_URL=%s", (url) => {
    const { code, output } = start({ PORT: "4999", DATABASE_URL: url });
    expect([code, output]).toEqual([1, expect.stringContaining("DATABASE_URL must read mysql://")]);
    expect(output).not.toMatch(/^\s+at /m);
  });
});

describe("the other commands say what they need", () => {
  it.each([
    ["backup.js", "npm run backup -- FOLDER"],
    ["restore.js", "npm run restore -- FOLDER"],
    ["grant.js", "npm run grant -- ADDRESS ROLE"],
  ])("%s", (script, usage) => {
    const { code, output } = command(script, []);
    expect([code, output]).toEqual([1, expect.stringContaining(usage)]);
  });

  it("backup without a registry", () => {
    const env = { FOGLINE_DATA: path.join(folder, "nothing"), DATABASE_URL: "" };
    const { code, output } = command("backup.js", [path.join(folder, "copy")], env);
    expect([code, output]).toEqual([1, expect.stringContaining("There is no registry here yet")]);
  });
});
