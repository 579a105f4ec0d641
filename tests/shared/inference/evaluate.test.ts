import { spawnSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import os from "node:os";
import path from "node:path";

import boltzmann from "../../fixtures/checks/boltzmann.json";
import reference from "../../fixtures/checks/reference.json";

jest.setTimeout(120_000);
const folder = mkdtempSync(path.join(os.tmpdir(), "evaluate-"));
afterAll(() => rmSync(folder, { recursive: true }));

function evaluate(content: unknown, ...options: string[]) {
  const file = path.join(folder, "file.json");
  writeFileSync(file, typeof content === "string" ? content : JSON.stringify(content));
  const script = path.join("scripts", "evaluate.ts");
  const args = ["-r", "@swc-node/register", script, file, ...options];
  return spawnSync(process.execPath, args, { encoding: "utf8" });
}

describe("npm run evaluate", () => {
  it("mirrors a reference file with its own output keys", () => {
    const { status, stdout } = evaluate(reference);
    expect(status).toBe(0);
    const { cases } = JSON.parse(stdout) as { cases: Record<string, number | string>[] };
    expect(cases.map(({ id }) => id)).toEqual(reference.cases.map(({ id }) => id));
    cases.forEach((answer, i) => {
      const expected = reference.cases[i] as unknown as Record<string, number | string>;
      for (const [key, value] of Object.entries(answer)) {
        if (typeof value === "string") expect(value).toBe(expected[key]);
        // PHYSICS.md section 2; a peak's place is known to the reference's search only.
        else {
          const difference = Math.abs(value - (expected[key] as number));
          const allowed = key === "peak_at" ? 1e-7 : 1e-8 * Math.abs(value) + 1e-10;
          expect(difference).toBeLessThanOrEqual(allowed);
        }
      }
    });
  });

  it("mirrors a file of a Boltzmann code's optical depths", () => {
    const { status, stdout } = evaluate(boltzmann);
    expect(status).toBe(0);
    const { cases } = JSON.parse(stdout) as { cases: { id: string; tau: number }[] };
    boltzmann.cases.forEach((expected, i) => {
      expect(cases[i]!.id).toBe(expected.id);
      expect(Math.abs(cases[i]!.tau - expected.tau)).toBeLessThan(4e-5);
    });
  });

  it.each<[string, unknown, string]>([
    [
      "an unknown function",
      { cases: [{ id: "q1", function: "nope", inputs: {} }] },
      "q1: there is no function “nope”",
    ],
    [
      "a missing input",
      { cases: [{ id: "q2", function: "age", inputs: { z: 1 } }] },
      "q2: “cosmology” is missing",
    ],
    [
      "a number out of range",
      { cases: [{ id: "q3", function: "z_of_21cm_frequency", inputs: { MHz: -1 } }] },
      "q3: frequencyMHz must be positive",
    ],
    ["a case that is no object", { cases: [7] }, "cases[0]: not an object"],
    ["something else", { a: 1 }, "neither “cases” nor “rows”"],
    ["no JSON", "{", "can't be read as JSON"],
  ])("ends with 2 and names the case for %s", (_, content, message) => {
    const { status, stderr, stdout } = evaluate(content);
    expect(status).toBe(2);
    expect(stderr).toContain(message);
    expect(stdout).toBe("");
  });
});
