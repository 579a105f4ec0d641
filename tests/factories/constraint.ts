import { randomBytes } from "node:crypto";

import type { DataSource } from "typeorm";

import { Citation } from "~server/citation/citation.entity";
import { keepCitations } from "~server/citation/citation.service";
import { Refusal } from "~server/common/outcomes";
import { createDraft, reload, saveDraft, submitDraft } from "~server/constraint/draft.service";
import { allFindings, neighbours } from "~server/constraint/neighbours";
import type { Revision } from "~server/constraint/revision.entity";
import type { User } from "~server/account/user.entity";
import type { Acting } from "~server/event/acting";
import {
  acceptAnswer,
  approve,
  claim,
  storeReading,
  tickChecklist,
} from "~server/review/review.service";
import { checklistFor } from "~shared/review/checklist";
import { emptyFields, type ConstraintFields } from "~shared/statement/fields";

/** A person as services see them, without a request. */
export function actingAs(database: DataSource, user: User, now = new Date()): Acting {
  return {
    database,
    viewer: {
      id: user.id,
      email: user.email,
      nameOnPapers: user.nameOnPapers,
      furtherNames: user.furtherNames,
      orcid: user.orcid,
      roles: user.roles.map((grant) => grant.role),
    },
    now,
    licence: "CC BY 4.0",
    publicUrl: "http://fogline.test",
    sendsMail: true,
  };
}

/** The content, or a test that says in words why it was refused. */
export function granted<T>(outcome: T | Refusal): T {
  if (outcome instanceof Refusal) throw new Error(`${outcome.code}: ${outcome.message}`);
  return outcome;
}

/** A complete statement of an invented paper; overrides make it another one. */
export function buildFields(overrides: Partial<ConstraintFields> = {}): ConstraintFields {
  const fields: ConstraintFields = {
    ...emptyFields(),
    quantity: "neutralFraction",
    species: "neutral",
    scale: "linear",
    weighting: "volume",
    zRole: "point",
    z: "7.13",
    kind: "twoSided",
    value: "0.43",
    plus: "0.12",
    minus: "0.15",
    level: "oneSigma",
    estimator: "median",
    methodTags: ["quasarDampingWing"],
    cosmicVariance: "included",
    dataUsed: ["Test sightline 1"],
    dataKnown: true,
    versionRead: "published",
    place: "Table 2, row 3",
    page: "11",
    ...overrides,
  };
  return "printedText" in overrides ? fields : { ...fields, printedText: printedTextOf(fields) };
}

/** Every number of the statement, as a paper could print it in a line. */
function printedTextOf(fields: ConstraintFields): string {
  const numbers = [
    fields.z,
    fields.zLow,
    fields.zHigh,
    fields.value,
    fields.plus,
    fields.minus,
    fields.limitBase,
    fields.limitSigma,
    fields.bandLow,
    fields.bandHigh,
    fields.rangeLow,
    fields.rangeHigh,
    fields.fractionFrom,
    fields.fractionTo,
    fields.fraction,
  ];
  return `we find ${numbers.filter((text) => text !== null).join(", ")}`;
}

/** An invented paper, unlike every other one. */
export async function buildCitation(
  database: DataSource,
  user: User,
  overrides: { author?: string; year?: number; title?: string } = {},
): Promise<Citation> {
  const word = randomBytes(5).toString("hex");
  const { author = `Quelle${word}, Rona and Umber, Pelle`, year = 2031 } = overrides;
  const { title = `A look through the mist called ${word}` } = overrides;
  const kept = granted(
    await keepCitations(
      actingAs(database, user),
      `@article{any, author = {${author}}, title = {${title}}, journal = {Annals of Imaginary Skies}, year = ${year}, doi = {10.5555/${word}}}`,
      null,
    ),
  );
  const [first] = kept.kept;
  if (!first) throw new Error("the factory's paper was not kept");
  return database.manager.findOneByOrFail(Citation, { id: first.citation.id });
}

/** A draft with this content. */
export async function buildDraft(
  database: DataSource,
  owner: User,
  overrides: Partial<ConstraintFields> = {},
  citation?: Citation,
): Promise<Revision> {
  const paper = citation ?? (await buildCitation(database, owner));
  return database.transaction((manager) =>
    createDraft(manager, {
      ownerId: owner.id,
      citationId: paper.id,
      fields: buildFields(overrides),
    }),
  );
}

/** Sends a draft, with an answer to whatever must be answered. */
export async function send(
  database: DataSource,
  owner: User,
  draft: Revision,
  now = new Date(),
): Promise<Revision> {
  const who = actingAs(database, owner, now);
  const among = await neighbours(database.manager, who.viewer);
  const answers = allFindings(draft.fields, draft.citationId, draft.constraintId, among)
    .filter((finding) => finding.grade === "mustAnswer")
    .map(({ code }) => ({ code, answer: "The paper says so." }));
  const { id, version, fields } = draft;
  const saved = granted(await saveDraft(who, { id, version, fields, answers }));
  return granted(await submitDraft(who, id, saved.version, true));
}

export async function buildSubmission(
  database: DataSource,
  owner: User,
  overrides: Partial<ConstraintFields> = {},
  citation?: Citation,
): Promise<Revision> {
  return send(database, owner, await buildDraft(database, owner, overrides, citation));
}

/** A submission that an editor has read, agreeing in every field, and approved. */
export async function buildApproved(
  database: DataSource,
  owner: User,
  editor: User,
  overrides: Partial<ConstraintFields> = {},
  citation?: Citation,
): Promise<Revision> {
  const submitted = await buildSubmission(database, owner, overrides, citation);
  return approveAs(database, editor, submitted);
}

/** Ticks every point of the checklist. */
export async function tickAll(who: Acting, { id, fields }: Revision): Promise<void> {
  const codes = checklistFor(fields).map(({ code }) => code);
  granted(await tickChecklist(who, id, codes));
}

export async function approveAs(
  database: DataSource,
  editor: User,
  submitted: Revision,
): Promise<Revision> {
  const who = actingAs(database, editor);
  granted(await claim(who, submitted.id));
  let current = granted(await storeReading(who, submitted.id, submitted.fields));
  for (const { code } of current.answers) {
    current = granted(await acceptAnswer(who, current.id, code));
  }
  await tickAll(who, current);
  granted(await approve(who, current.id, current.version, null));
  return reload(database.manager, submitted.id);
}
