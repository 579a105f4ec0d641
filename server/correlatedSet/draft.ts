import type { EntityManager } from "typeorm";

import { Citation } from "~server/citation/citation.entity";
import { done, refuse, type Done, type Refusal } from "~server/common/outcomes";
import type { StoredAnswer } from "~server/constraint/revision.entity";
import { change, type Acting } from "~server/event/acting";
import { setFindings, type SetFinding } from "~shared/correlatedSet/checks";
import {
  fitTriangle,
  LONGEST_ENTRY,
  LONGEST_SET_LABEL,
  LONGEST_SET_TEXT,
  MOST_MEMBERS,
  NEXT_SET_STATES,
  type MatrixKind,
  type SetContent,
} from "~shared/correlatedSet/content";
import { formatRecordNumber, parseRecordNumber } from "~shared/identifiers/recordNumber";
import { formatSetNumber } from "~shared/identifiers/setNumber";
import { mayWithOwn, type Action } from "~shared/review/policy";

import { CorrelatedSet } from "./correlatedSet.entity";
import { tellEditorsOfSet } from "./mails";
import {
  contentOfSet,
  loadSet,
  lockMembers,
  membersFor,
  reloadSet,
  setWithMember,
  updateSetAt,
} from "./store";

const MOST_OPEN_SETS = 200;
const MOST_ANSWERS = 100;
export const STALE_SET =
  "This set was changed in another window since you opened it. Reload it to see the newer text.";

const unknownSet = (): Refusal => refuse("notFound", "There is no such set among yours.");

/** What a set says, as it comes from a person. */
export interface SetInput {
  label?: string | null;
  members: readonly string[];
  matrixKind?: MatrixKind | null;
  triangle: readonly (readonly string[])[];
  place?: string | null;
  page?: string | null;
  note?: string | null;
}

/** Input as content: trimmed, record numbers in their one spelling, the triangle at its size. */
function contentFromInput(input: SetInput): SetContent | Refusal {
  if (input.members.length > MOST_MEMBERS || input.triangle.length > MOST_MEMBERS) {
    return refuse("tooMany", `A set has at most ${MOST_MEMBERS} records.`, "members");
  }
  const ids = input.members.map(parseRecordNumber);
  const strange = ids.indexOf(null);
  if (strange >= 0) {
    const text = input.members[strange]?.slice(0, 40) ?? "";
    return refuse("members", `“${text}” is no record number.`, "members");
  }
  const entries = input.triangle.map((row) => row.map((text) => text.trim()));
  if (
    entries.some((row) => row.length > MOST_MEMBERS || row.some((t) => t.length > LONGEST_ENTRY))
  ) {
    return refuse("tooLong", "An entry of the matrix is too long to be a number.", "entry");
  }
  const texts = { label: input.label, place: input.place, page: input.page, note: input.note };
  const longest = {
    label: LONGEST_SET_LABEL,
    place: LONGEST_SET_TEXT,
    page: 120,
    note: LONGEST_SET_TEXT,
  };
  const kept: Record<keyof typeof texts, string | null> = {
    label: null,
    place: null,
    page: null,
    note: null,
  };
  for (const name of Object.keys(texts) as (keyof typeof texts)[]) {
    const text = texts[name]?.trim() ?? "";
    if (text.length > longest[name]) {
      return refuse("tooLong", `This has at most ${longest[name]} characters.`, name);
    }
    kept[name] = text === "" ? null : text;
  }
  const members = ids.map((id) => formatRecordNumber(id ?? 0));
  return {
    ...kept,
    members,
    matrixKind: input.matrixKind ?? null,
    triangle: fitTriangle(entries, members.length),
  };
}

async function ownSet(
  action: Action,
  who: Acting,
  manager: EntityManager,
  number: string,
): Promise<CorrelatedSet | null> {
  const set = await loadSet(manager, number);
  return set && mayWithOwn(action, set.ownerId === who.viewer.id) ? set : null;
}

/** Adds a set with its event; the first of a chain gives the chain its number. */
async function insertSet(
  manager: EntityManager,
  parts: SetContent & {
    ownerId: string;
    citationId: string;
    follows: CorrelatedSet | null;
    answers: StoredAnswer[];
    at: Date;
  },
): Promise<CorrelatedSet> {
  const { follows, at, ...content } = parts;
  const inserted = await manager.insert(CorrelatedSet, {
    ...content,
    chainId: follows?.chainId ?? 0,
    followsId: follows?.id ?? null,
    state: "draft",
    version: 1,
    findings: [],
    memberRevisions: [],
    createdAt: at,
    updatedAt: at,
  } as never);
  const id = Number((inserted.identifiers[0] as { id: number }).id);
  if (!follows) await manager.update(CorrelatedSet, { id }, { chainId: id });
  return reloadSet(manager, id);
}

/** Starts a set over records of one paper; they may be changed until it is submitted. */
export async function startSet(
  who: Acting,
  citationId: string,
  members: readonly string[],
): Promise<CorrelatedSet | Refusal> {
  const content = contentFromInput({ members: [...new Set(members)], triangle: [] });
  if (!("members" in content)) return content;
  return change<CorrelatedSet | Refusal>(who, async (here) => {
    const { manager } = here;
    if (!(await manager.existsBy(Citation, { id: citationId }))) {
      return refuse("citation", "This citation is not in the registry.", "citation");
    }
    const open = await manager.countBy(CorrelatedSet, { ownerId: who.viewer.id, state: "draft" });
    if (open >= MOST_OPEN_SETS) {
      return refuse("tooMany", `You have ${open} open sets. Send or discard some first.`);
    }
    const set = await insertSet(manager, {
      ...content,
      ownerId: who.viewer.id,
      citationId,
      follows: null,
      answers: [],
      at: who.now,
    });
    await here.event({ kind: "correlatedSet.drafted", subject: formatSetNumber(set.id) });
    return set;
  });
}

export interface SetChanges extends SetInput {
  number: string;
  version: number;
  answers?: readonly { code: string; answer: string }[] | null;
}

/** Keeps what was typed. Saving is no change of state and leaves no event. */
export async function saveSet(who: Acting, changes: SetChanges): Promise<CorrelatedSet | Refusal> {
  const content = contentFromInput(changes);
  if (!("members" in content)) return content;
  const answers = changes.answers ?? null;
  if (
    answers &&
    (answers.length > MOST_ANSWERS || answers.some((one) => one.answer.length > LONGEST_SET_TEXT))
  ) {
    return refuse("tooLong", `An answer has at most ${LONGEST_SET_TEXT} characters.`);
  }
  return change<CorrelatedSet | Refusal>(who, async ({ manager }) => {
    const set = await ownSet("saveSet", who, manager, changes.number);
    if (!set) return unknownSet();
    if (set.state !== "draft") return notADraft(set);
    const won = await updateSetAt(manager, set.id, changes.version, ["draft"], {
      ...content,
      ...(answers ? { answers: keptAnswers(answers) } : {}),
      updatedAt: who.now,
    });
    return won ? reloadSet(manager, set.id) : refuse("stale", STALE_SET);
  });
}

function keptAnswers(answers: readonly { code: string; answer: string }[]): StoredAnswer[] {
  const byCode = new Map<string, string>();
  for (const { code, answer } of answers) {
    if (answer.trim() !== "") byCode.set(code.slice(0, 200), answer.trim());
  }
  return [...byCode].map(([code, answer]) => ({ code, answer, accepted: false }));
}

function notADraft({ state }: CorrelatedSet): Refusal {
  const words: Record<CorrelatedSet["state"], string> = {
    draft: "It is a draft.",
    submitted: "It is submitted already and can't be changed. Discard it to start over.",
    inReview: "An editor is reading it; it can't be changed now.",
    returned: "It was returned. Answer it with a new set.",
    approved: "It is approved. Correct it with a new set.",
    withdrawn: "It is withdrawn.",
    discarded: "It was discarded.",
  };
  return refuse("notDraft", words[state]);
}

/** Everything to say about a set as this person sees its records. */
export async function findingsOf(
  manager: EntityManager,
  who: Pick<Acting, "viewer">,
  set: CorrelatedSet,
): Promise<SetFinding[]> {
  const members = await membersFor(manager, who.viewer, set.members);
  return setFindings(contentOfSet(set), members, set.citationId);
}

/** Sends a set to the editors, if nothing stands against it. From then on it doesn't change. */
export async function submitSet(
  who: Acting,
  number: string,
  version: number,
  agreesToLicence: boolean,
): Promise<CorrelatedSet | Refusal> {
  return change<CorrelatedSet | Refusal>(who, async (here) => {
    const { manager } = here;
    const set = await ownSet("submitSet", who, manager, number);
    if (!set) return unknownSet();
    if (set.state !== "draft") return notADraft(set);
    if (set.version !== version) return refuse("stale", STALE_SET);
    if (!agreesToLicence) {
      return refuse("licence", `Agree that the registry passes the set on under ${who.licence}.`);
    }
    await lockMembers(manager, set.members);
    const findings = await findingsOf(manager, who, set);
    const error = findings.find(({ grade }) => grade === "error");
    if (error) return refuse("findings", error.message, error.fields[0] ?? null);
    const answered = new Set(set.answers.map(({ code }) => code));
    const open = findings.find(({ grade, code }) => grade === "mustAnswer" && !answered.has(code));
    if (open) {
      return refuse("unanswered", `Answer this first: ${open.message}`, open.fields[0] ?? null);
    }
    const taken = await setWithMember(manager, set, ["submitted", "inReview", "approved"]);
    if (taken) return alreadyIn(taken);
    const codes = new Set(findings.map(({ code }) => code));
    const won = await updateSetAt(manager, set.id, version, ["draft"], {
      state: "submitted",
      submittedAt: who.now,
      updatedAt: who.now,
      licence: who.licence,
      findings,
      answers: set.answers.filter(({ code }) => codes.has(code)),
    });
    if (!won) return refuse("stale", STALE_SET);
    await here.event({
      kind: "correlatedSet.submitted",
      subject: formatSetNumber(set.id),
      detail: { members: set.members, citation: set.citation.key, licence: who.licence },
    });
    const submitted = await reloadSet(manager, set.id);
    await tellEditorsOfSet(here, who, submitted);
    return submitted;
  });
}

export function alreadyIn({ other, member }: { other: CorrelatedSet; member: string }): Refusal {
  return refuse(
    "otherSet",
    `${member} is part of ${formatSetNumber(other.id)} already: a record stands in one matrix only. Put the records into one set, or have the other one withdrawn.`,
    "members",
  );
}

/** Puts a draft aside, or takes back what no editor has claimed yet. */
export async function discardSet(
  who: Acting,
  number: string,
  version: number,
): Promise<Done | Refusal> {
  return change<Done | Refusal>(who, async (here) => {
    const set = await ownSet("discardSet", who, here.manager, number);
    if (!set) return unknownSet();
    if (!NEXT_SET_STATES[set.state].includes("discarded")) return notADraft(set);
    const won = await updateSetAt(here.manager, set.id, version, [set.state], {
      state: "discarded",
      updatedAt: who.now,
    });
    if (!won) return refuse("stale", STALE_SET);
    await here.event({
      kind: "correlatedSet.discarded",
      subject: formatSetNumber(set.id),
      detail: { from: set.state },
    });
    return done("Discarded.");
  });
}

/**
 * A new set that answers a return, or corrects an approved or withdrawn one. An answer that was
 * begun already is handed back. An approved one stays in use until the new one is approved.
 */
export async function reviseSet(who: Acting, number: string): Promise<CorrelatedSet | Refusal> {
  return change<CorrelatedSet | Refusal>(who, async (here) => {
    const { manager } = here;
    const followed = await ownSet("reviseSet", who, manager, number);
    if (!followed) return unknownSet();
    if (!["returned", "approved", "withdrawn"].includes(followed.state)) {
      return refuse("notDecided", "Only a decided set can be followed by another.");
    }
    // The first set's row puts two who revise at once in a line.
    await manager.query("SELECT id FROM correlated_set WHERE id = ? FOR UPDATE", [
      followed.chainId,
    ]);
    const chain = await manager.find(CorrelatedSet, {
      where: { chainId: followed.chainId },
      order: { id: "DESC" },
    });
    const open = chain.find(({ state }) => ["draft", "submitted", "inReview"].includes(state));
    if (open?.state === "draft") return reloadSet(manager, open.id);
    if (open) return refuse("open", `${formatSetNumber(open.id)} is with the editors already.`);
    const latest = chain.find(({ state }) => state !== "discarded");
    if (latest?.id !== followed.id) {
      return refuse("notLatest", "A later set follows this one. Revise that one.");
    }
    const set = await insertSet(manager, {
      ...contentOfSet(followed),
      ownerId: who.viewer.id,
      citationId: followed.citationId,
      follows: followed,
      answers: followed.answers.map((answer) => ({ ...answer, accepted: false })),
      at: who.now,
    });
    await here.event({
      kind: "correlatedSet.drafted",
      subject: formatSetNumber(set.id),
      detail: { follows: formatSetNumber(followed.id) },
    });
    return set;
  });
}
