"use strict";
const path = require("node:path");

const { PlainFailure } = require("./failure");
const { rememberedHeads } = require("./logHeads");
const { readJson } = require("./paths");

const USAGE = "Say it like this: npm run verify-log -- [--against BACKUP]… [--head NUMBER:DIGEST]…";

/**
 * The heads of the event log that are kept outside the database.
 *
 * @param words - Arguments: backups with --against, heads with --head (a downloaded file names one).
 * @returns {{ anchors: { source: string, sequence: number, digest: string }[], notes: string[] }}
 * @throws {PlainFailure} If an argument makes no sense or a folder holds no backup.
 */
function headsFor(words) {
  const anchors = [];
  for (let i = 0; i < words.length; i += 2) {
    const value = words[i + 1];
    if (words[i] === "--against" && value) anchors.push(...headOfBackup(value));
    else if (words[i] === "--head" && value) anchors.push(headInWords(value));
    else throw new PlainFailure(USAGE);
  }
  const notes = [];
  for (const { folder, made, sequence, digest, setAside } of rememberedHeads()) {
    const source = `the backup of ${made} in ${folder}`;
    if (setAside)
      notes.push(`Set aside by the restore of ${setAside}: event ${sequence} of ${source}.`);
    else if (!anchors.some((one) => one.sequence === sequence && one.digest === digest))
      anchors.push({ source, sequence, digest });
  }
  return { anchors, notes };
}

function headOfBackup(folder) {
  const place = path.resolve(folder);
  const manifest = readJson(path.join(place, "manifest.json"));
  if (!/^fogline-backup-/.test(manifest?.format ?? ""))
    throw new PlainFailure(`${place} holds no backup made by npm run backup.`);
  const { eventLog, made } = manifest;
  return eventLog === null ? [] : [{ source: `the backup of ${made} in ${place}`, ...eventLog }];
}

function headInWords(value) {
  const [, sequence, digest] = /^(\d{1,10}):([0-9a-f]{64})$/.exec(value) ?? [];
  if (!digest) throw new PlainFailure(USAGE);
  return { source: "the head given with --head", sequence: Number(sequence), digest };
}

module.exports = { headsFor };
