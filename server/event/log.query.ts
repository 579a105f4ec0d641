import type { EntityManager, SelectQueryBuilder } from "typeorm";

import { User } from "~server/account/user.entity";
import { eventSentence } from "~shared/event/words";
import {
  formatRecordNumber,
  parseQuotable,
  parseRecordNumber,
} from "~shared/identifiers/recordNumber";
import { formatSetNumber, parseSetNumber } from "~shared/identifiers/setNumber";

import { EventRecord } from "./event.entity";

/** What a maintainer looks for in the log; whatever is left out or empty does not narrow it. */
export interface LogFilter {
  /** Part of a person's name or address, or the id. */
  person?: string | null;
  /** FL-0042 with all its revisions, FL-0042.3, FLS-0003, or a subject as it is written. */
  about?: string | null;
  kind?: string | null;
  /** First and last day, as 2031-02-03, in UTC. */
  from?: string | null;
  to?: string | null;
}

/** An event in words. */
export interface LogEntry {
  sequence: number;
  at: Date;
  kind: string;
  sentence: string;
  actorId: string | null;
  who: string | null;
  subject: string;
  detail: Record<string, unknown>;
  previousDigest: string;
  digest: string;
}

const LONGEST_TEXT = 120;
const MOST_PEOPLE = 200;
const DAY = /^\d{4}-\d{2}-\d{2}$/;

/** Events of the filter, newest first, from just before `before`. */
export async function findEvents(
  manager: EntityManager,
  filter: LogFilter,
  { before, limit }: { before: number | null; limit: number },
): Promise<LogEntry[]> {
  const query = await filtered(manager, filter);
  if (before !== null) query.andWhere("event.sequence < :before", { before });
  const events = await query.orderBy("event.sequence", "DESC").take(limit).getMany();
  return inWords(manager, events);
}

export async function countEvents(manager: EntityManager, filter: LogFilter): Promise<number> {
  return (await filtered(manager, filter)).getCount();
}

async function filtered(
  manager: EntityManager,
  filter: LogFilter,
): Promise<SelectQueryBuilder<EventRecord>> {
  const query = manager.createQueryBuilder(EventRecord, "event").where("1 = 1");
  const text = (word: string | null | undefined): string =>
    (word ?? "").trim().slice(0, LONGEST_TEXT);

  const person = text(filter.person);
  if (person !== "") {
    const ids = await peopleLike(manager, person);
    // An empty list matches nothing, as it should.
    if (ids.length === 0) query.andWhere("1 = 0");
    else query.andWhere("event.actorId IN (:...ids)", { ids });
  }
  const about = text(filter.about);
  if (about !== "") narrowToSubject(query, about);
  const kind = text(filter.kind);
  if (kind !== "") query.andWhere("event.kind = :kind", { kind });
  const from = dayStart(filter.from);
  if (from) query.andWhere("event.at >= :from", { from });
  const to = dayStart(filter.to);
  if (to) query.andWhere("event.at < :to", { to: new Date(to.getTime() + 86_400_000) });
  return query;
}

function narrowToSubject(query: SelectQueryBuilder<EventRecord>, about: string): void {
  const record = parseRecordNumber(about);
  const set = parseSetNumber(about);
  if (parseQuotable(about) === null && record !== null) {
    const number = formatRecordNumber(record);
    query.andWhere("(event.subject = :number OR event.subject LIKE :revisions)", {
      number,
      revisions: `${number}.%`,
    });
    return;
  }
  const subject =
    record !== null
      ? `${formatRecordNumber(record)}.${parseQuotable(about)?.ordinal ?? 1}`
      : set !== null
        ? formatSetNumber(set)
        : about;
  query.andWhere("event.subject = :subject", { subject });
}

async function peopleLike(manager: EntityManager, text: string): Promise<string[]> {
  const pattern = `%${text.replace(/[\\%_]/g, "\\$&")}%`;
  const people = await manager
    .createQueryBuilder(User, "user")
    .select("user.id")
    .where("user.nameOnPapers LIKE :pattern OR user.email LIKE :pattern OR user.id = :text", {
      pattern,
      text: /^[0-9a-f-]{36}$/i.test(text) ? text : null,
    })
    .take(MOST_PEOPLE)
    .getMany();
  return people.map(({ id }) => id);
}

/** Midnight, UTC, of a day that exists; null for anything else. */
function dayStart(day: string | null | undefined): Date | null {
  if (!day || !DAY.test(day)) return null;
  const at = new Date(`${day}T00:00:00Z`);
  return Number.isNaN(at.getTime()) || !at.toISOString().startsWith(day) ? null : at;
}

const PERSON = "user:";

const isId = (value: unknown): value is string =>
  typeof value === "string" && /^[0-9a-f-]{36}$/.test(value);

/** The events with their sentences; the names are those of today, of a former member what they chose. */
async function inWords(
  manager: EntityManager,
  events: readonly EventRecord[],
): Promise<LogEntry[]> {
  const ids = new Set<string>();
  for (const { actorId, subject, detail } of events) {
    if (actorId) ids.add(actorId);
    if (isId(detail.to)) ids.add(detail.to);
    if (subject.startsWith(PERSON)) ids.add(subject.slice(PERSON.length));
  }
  const people =
    ids.size === 0
      ? []
      : await manager
          .createQueryBuilder(User, "user")
          .select(["user.id", "user.nameOnPapers"])
          .where("user.id IN (:...ids)", { ids: [...ids] })
          .getMany();
  const names = new Map(people.map((one) => [one.id, one.nameOnPapers]));
  return events.map((event) => {
    const who = event.actorId === null ? null : (names.get(event.actorId) ?? "Somebody");
    const person = event.subject.startsWith(PERSON)
      ? (names.get(event.subject.slice(PERSON.length)) ?? null)
      : null;
    const { subject, detail } = event;
    const to = isId(detail.to) ? (names.get(detail.to) ?? null) : null;
    const sentence = eventSentence(event.kind, { who, subject, person, to, detail });
    return { ...event, who, sentence };
  });
}
