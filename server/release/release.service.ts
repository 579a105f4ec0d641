import type { EntityManager } from "typeorm";

import { refuse, type Refusal } from "~server/common/outcomes";
import { approvedFor, approvedRow, type ApprovedRow } from "~server/constraint/constraint.query";
import { isDemonstration } from "~server/database/settings";
import { change, undo, type Acting } from "~server/event/acting";
import { EventHead } from "~server/event/event.entity";
import { lastEvent } from "~server/event/eventLog";
import { RecordNotice } from "~server/recordLife/recordNotice.entity";
import { copyRecords } from "~server/table/copyRecords";
import { presentSurroundings } from "~server/table/surroundings";
import { formatQuotable, formatRecordNumber } from "~shared/identifiers/recordNumber";
import { diffFields } from "~shared/review/reading";
import { fieldFindings } from "~shared/statement/rules";
import { fieldText } from "~shared/statement/words";

import { Release, ReleaseRow, rowContent } from "./release.entity";
import { canonicalContent, canonicalText, digestOfPieces, digestOfText } from "./releaseContent";

const LONGEST_NOTES = 5000;
const PAGE = 200;

/** What stands against a release now, and what it would hold. */
export interface Readiness {
  /** Sentences; empty when it can be cut. */
  blockers: string[];
  records: number;
  /** Number of the newest release; null before the first. */
  latest: number | null;
}

/** Approved records page by page, by number, as the public sees them. */
async function* approvedByNumber(manager: EntityManager): AsyncGenerator<ApprovedRow> {
  let after = 0;
  for (;;) {
    const page = await approvedFor(manager, null)
      .andWhere("record.id > :after", { after })
      .orderBy("record.id")
      .limit(PAGE)
      .getMany();
    yield* page.map(approvedRow);
    const last = page.at(-1);
    if (!last || page.length < PAGE) return;
    after = last.constraintId;
  }
}

/** Every approved record must be valid by today's rules, and none may be under review. */
export async function readiness(manager: EntityManager, now: Date): Promise<Readiness> {
  const blockers: string[] = [];
  let records = 0;
  for await (const { constraint, revision } of approvedByNumber(manager)) {
    records += 1;
    const error = fieldFindings(revision.fields, { citation: true }).find(
      (finding) => finding.grade === "error",
    );
    if (error) {
      blockers.push(`${formatQuotable(constraint.id, revision.ordinal)}: ${error.message}`);
    }
  }
  const claimed: { id: number }[] = await manager.query(
    `SELECT DISTINCT held.constraintId AS id FROM revision held
       JOIN constraint_record record ON record.id = held.constraintId
      WHERE held.state = 'inReview' AND held.claimedUntil > ?
        AND record.approvedRevisionId IS NOT NULL AND record.state <> 'withdrawn'
      ORDER BY held.constraintId`,
    [now],
  );
  if (claimed.length > 0) {
    const numbers = claimed.map(({ id }) => formatRecordNumber(Number(id))).join(", ");
    blockers.push(`An editor is reading a new revision of ${numbers}. Wait for the decision.`);
  }
  if (records === 0) blockers.push("There is no approved record yet.");
  const [newest] = await manager.find(Release, { order: { number: "DESC" }, take: 1 });
  return { blockers, records, latest: newest?.number ?? null };
}

/**
 * Cuts a release of all approved records. The head of the event log is locked first: no change of
 * state can come to be true between the first row read and the last.
 */
export async function cutRelease(who: Acting, notes: string): Promise<Release | Refusal> {
  const words = notes.trim();
  if (words === "" || words.length > LONGEST_NOTES) {
    return refuse("notes", `Give notes of 1 to ${LONGEST_NOTES} characters.`, "notes");
  }
  return change<Release | Refusal>(who, async (here) => {
    const { manager } = here;
    await manager
      .createQueryBuilder(EventHead, "head")
      .setLock("pessimistic_write")
      .where("head.id = 1")
      .getOne();
    const { blockers, latest } = await readiness(manager, who.now);
    const [blocker] = blockers;
    if (blocker !== undefined) return refuse("notReady", blocker);
    const last = await lastEvent(manager);
    if (!last) return refuse("notReady", "There is nothing in the registry yet.");

    const number = (latest ?? 0) + 1;
    const release = {
      number,
      cutAt: who.now,
      cutById: who.viewer.id,
      notes: words,
      licence: who.licence,
      demonstration: await isDemonstration(manager),
      surroundings: canonicalText(await presentSurroundings(manager)),
      lastEventSequence: last.sequence,
      lastEventDigest: last.digest,
      lastEventAt: last.at,
    };
    await manager.insert(Release, { ...release, records: 0, digest: "" });
    let records = 0;
    const digest = await digestOfPieces(
      canonicalContent(
        release,
        copied(manager, number, () => (records += 1)),
      ),
    );
    if (latest !== null) {
      const before = await manager.findOneByOrFail(Release, { number: latest });
      if (before.digest === digest) {
        return undo(refuse("unchanged", `Nothing has changed since release ${latest}.`));
      }
    }
    await manager.update(Release, { number }, { records, digest });
    await here.event({
      kind: "release.cut",
      subject: `release:${number}`,
      detail: { digest, records },
    });
    return manager.findOneOrFail(Release, { where: { number }, relations: { cutBy: true } });
  });
}

/** Copies every approved record into the release and hands on its canonical text. */
async function* copied(
  manager: EntityManager,
  number: number,
  count: () => void,
): AsyncGenerator<string> {
  for await (const page of pages(approvedByNumber(manager))) {
    const rows = (await copyRecords(manager, page)).map((record) => ({
      constraintId: record.id,
      ordinal: record.ordinal,
      content: canonicalText(record),
    }));
    for (const row of rows) {
      await manager.insert(ReleaseRow, {
        releaseNumber: number,
        ...row,
        digest: digestOfText(row.content),
      });
      count();
      yield row.content;
    }
  }
}

async function* pages<T>(items: AsyncIterable<T>): AsyncGenerator<T[]> {
  let page: T[] = [];
  for await (const item of items) {
    page.push(item);
    if (page.length === PAGE) {
      yield page;
      page = [];
    }
  }
  if (page.length > 0) yield page;
}

export async function findReleases(manager: EntityManager): Promise<Release[]> {
  return manager.find(Release, { relations: { cutBy: true }, order: { number: "DESC" } });
}

export async function findRelease(manager: EntityManager, number: number): Promise<Release | null> {
  return manager.findOne(Release, { where: { number }, relations: { cutBy: true } });
}

/** Notices that hold about a release's records, recorded since it was cut; oldest first. */
export async function noticesSince(
  manager: EntityManager,
  number: number,
  cutAt: Date,
): Promise<RecordNotice[]> {
  return manager
    .createQueryBuilder(RecordNotice, "notice")
    .innerJoin(
      ReleaseRow,
      "row",
      "row.constraintId = notice.constraintId AND row.releaseNumber = :number",
      { number },
    )
    .where("notice.endedAt IS NULL AND notice.at > :cutAt", { cutAt })
    .orderBy("notice.at")
    .addOrderBy("notice.id")
    .getMany();
}

/** How one release differs from another, by record. */
export interface ReleaseDifference {
  added: RecordOf[];
  removed: RecordOf[];
  changed: (RecordOf & {
    before: string;
    changes: { field: string; before: string | null; after: string | null }[];
  })[];
}

interface RecordOf {
  number: string;
  quotable: string;
  shortName: string;
}

/**
 * What changed from one release to another, in the order of record numbers.
 *
 * @param readBlind - Records that the viewer is reading blind: they are named without their content.
 */
export async function releaseDifference(
  manager: EntityManager,
  from: number,
  to: number,
  readBlind: ReadonlySet<number>,
): Promise<ReleaseDifference> {
  const differing: { id: number; before: string | null; after: string | null }[] =
    await manager.query(
      `SELECT id, MAX(IF(side = 0, digest, NULL)) AS \`before\`, MAX(IF(side = 1, digest, NULL)) AS \`after\`
         FROM (SELECT constraintId AS id, digest, 0 AS side FROM registry_release_row WHERE releaseNumber = ?
               UNION ALL
               SELECT constraintId AS id, digest, 1 AS side FROM registry_release_row WHERE releaseNumber = ?) both_sides
        GROUP BY id
       HAVING NOT (\`before\` <=> \`after\`)
        ORDER BY id`,
      [from, to],
    );
  const difference: ReleaseDifference = { added: [], removed: [], changed: [] };
  for (const { id } of differing) {
    const load = (number: number): Promise<ReleaseRow | null> =>
      manager.findOneBy(ReleaseRow, { releaseNumber: number, constraintId: Number(id) });
    const [before, after] = [await load(from), await load(to)];
    if (before && after) {
      difference.changed.push({
        ...recordOf(after),
        before: formatQuotable(before.constraintId, before.ordinal),
        changes: readBlind.has(Number(id)) ? [] : changesBetween(before, after),
      });
    } else if (after) difference.added.push(recordOf(after));
    else if (before) difference.removed.push(recordOf(before));
  }
  return difference;
}

function recordOf(row: ReleaseRow): RecordOf {
  const { number, citation } = rowContent(row);
  return {
    number,
    quotable: formatQuotable(row.constraintId, row.ordinal),
    shortName: citation.shortName,
  };
}

function changesBetween(
  before: ReleaseRow,
  after: ReleaseRow,
): ReleaseDifference["changed"][number]["changes"] {
  const [old, now] = [rowContent(before), rowContent(after)];
  const changes = diffFields(old.fields, now.fields).map((field) => ({
    field,
    before: fieldText(field, old.fields) || null,
    after: fieldText(field, now.fields) || null,
  }));
  if (old.state !== now.state) {
    changes.push({ field: "state", before: old.state, after: now.state } as never);
  }
  return changes;
}
