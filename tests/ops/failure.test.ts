import { PlainFailure, explain, lastWords } from "../../scripts/lib/failure";
import { nodeComplaint } from "../../scripts/lib/nodeVersion";

describe("explain", () => {
  it("says that the disk is full for ENOSPC, whichever tool says it and how", () => {
    const full = expect.objectContaining({ sentence: expect.stringMatching(/^The disk is full/) });
    expect(explain(Object.assign(new Error("write"), { code: "ENOSPC" }))).toEqual(full);
    const words = [
      "npm error code ENOSPC",
      "tar: No space left on device",
      "[ERROR] InnoDB: preallocating 100663296 bytes for file ./ib_logfile101 failed with error 28",
    ];
    for (const output of words)
      expect(explain(new PlainFailure("It failed.", { output }))).toEqual(full);
  });

  it("keeps the sentence of a failure that is none of the disk's", () => {
    expect(explain(new PlainFailure("Port 4600 is taken."))).toEqual({
      sentence: "Port 4600 is taken.",
      details: "",
    });
  });

  it("names the folder that may not be written", () => {
    const error = Object.assign(new Error("EACCES"), { code: "EACCES", path: "/somewhere" });
    expect(explain(error).sentence).toContain("may not write /somewhere");
  });
});

describe("lastWords", () => {
  it("holds no stack frame and no colour code", () => {
    const output =
      "\u001b[31mError\u001b[0m: no such module\n    at load (node:internal/modules:1:2)\n    at async main (/a/b.js:3:4)\n";
    expect(lastWords(output)).toBe("Error: no such module");
  });
});

describe("nodeComplaint", () => {
  it.each(["20.19.0", "20.20.2"])("accepts Node %s", (version) => {
    expect(nodeComplaint(version)).toBeNull();
  });

  it.each(["18.20.4", "20.18.3", "22.1.0"])("refuses Node %s in a sentence", (version) => {
    expect(nodeComplaint(version)).toMatch(new RegExp(`this is Node ${version}\\.`));
  });
});
