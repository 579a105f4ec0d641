"use strict";
const fs = require("node:fs");
const os = require("node:os");

const { ROOT, dataDirectory } = require("./paths");

/** A failure told to the person in one plain sentence; `details` are the last words of the tool that failed. */
class PlainFailure extends Error {
  constructor(sentence, { output = "", details = lastWords(output) } = {}) {
    super(sentence);
    this.name = "PlainFailure";
    this.details = details;
    this.diskFull = looksLikeDiskFull(output || details);
  }
}

/** Thrown into whatever is waiting when the person stops the program: nothing failed. */
class Interrupted extends Error {
  constructor() {
    super("Stopped.");
    this.name = "Interrupted";
  }
}

const DISK_FULL =
  "The disk is full. Free some space (about 3 GB for a first start) and run the command again.";

/** The last lines worth showing of a tool's output: no stack frames, no empty lines. */
function lastWords(output, lines = 12) {
  return output
    .split("\n")
    .map((line) => line.replace(/\u001b\[[0-9;]*m/g, "").trimEnd())
    .filter((line) => line.trim() !== "" && !/^\s+at .+[:(]/.test(line))
    .slice(-lines)
    .join("\n");
}

function looksLikeDiskFull(text) {
  return /ENOSPC|EDQUOT|No space left on device|Errcode: 28|errno: 28|error:? 28\b/i.test(text);
}

/** Tools seldom say that the disk was full, so a failure looks for itself. */
function isFull(places) {
  return places.some((place) => {
    try {
      const { bavail, bsize } = fs.statfsSync(place);
      return bavail * bsize < 20 * 1024 ** 2;
    } catch {
      return false;
    }
  });
}

/** Any error as a sentence for the person and what may be added under it. */
function explain(error) {
  if (error instanceof PlainFailure) {
    const full = isFull([ROOT, dataDirectory(), os.tmpdir()]);
    return error.diskFull || (full && error.details !== "")
      ? { sentence: DISK_FULL, details: "" }
      : { sentence: error.message, details: error.details };
  }
  const text = error instanceof Error ? error.message : String(error);
  const code = error && error.code;
  if (code === "ENOSPC" || code === "EDQUOT" || looksLikeDiskFull(text))
    return { sentence: DISK_FULL, details: "" };
  if ((code === "EACCES" || code === "EPERM" || code === "EROFS") && error.path)
    return {
      sentence: `This user may not write ${error.path}. Run the command as the user who owns the folder.`,
      details: "",
    };
  return { sentence: `This did not work: ${text}`, details: "" };
}

module.exports = { PlainFailure, Interrupted, explain, lastWords, looksLikeDiskFull, DISK_FULL };
