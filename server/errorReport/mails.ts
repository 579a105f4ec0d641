import type { EntityManager } from "typeorm";

import { RoleGrant } from "~server/account/roleGrant.entity";
import { User } from "~server/account/user.entity";
import type { Citation } from "~server/citation/citation.entity";
import { queueMail } from "~server/mail/outbox";
import { readsBlindUntil } from "~server/review/blindness";
import { formatQuotable } from "~shared/identifiers/recordNumber";
import { outcomeWords } from "~shared/review/errorReport";

import type { ErrorReport } from "./errorReport.entity";
import { reportToken } from "./link";
import { quoted } from "./text";

// A report may quote what the paper prints: its words stay on pages that ask who reads the record
// blind at this moment. Mails to the desk only say that it is there.

export interface Told {
  report: Pick<ErrorReport, "id" | "constraintId" | "reporterEmail" | "reporterId">;
  ordinal: number;
  citation: Pick<Citation, "title" | "key"> | null;
  publicUrl: string;
}

function quotable({ report, ordinal }: Told): string {
  return formatQuotable(report.constraintId, ordinal);
}

function paper({ citation }: Told): string {
  return citation === null ? "" : ` of ${citation.title} (${citation.key})`;
}

/** Tells editors, maintainers and the record's contributor that a report or a reply is there. */
export async function tellDesk(
  manager: EntityManager,
  told: Told,
  what: "report" | "reply",
  now: Date,
): Promise<void> {
  const { report, publicUrl } = told;
  const people = await manager
    .createQueryBuilder(User, "user")
    .leftJoin(RoleGrant, "role", "role.userId = user.id AND role.role IN ('editor', 'maintainer')")
    .leftJoin("constraint_record", "record", "record.id = :record AND record.ownerId = user.id", {
      record: report.constraintId,
    })
    .where("user.confirmedAt IS NOT NULL AND user.formerAt IS NULL")
    .andWhere("(role.userId IS NOT NULL OR record.id IS NOT NULL)")
    .orderBy("user.email")
    .getMany();
  const name = quotable(told);
  for (const person of people) {
    if (person.id === report.reporterId) continue;
    await queueMail(
      manager,
      {
        to: person.email,
        subject:
          what === "report"
            ? `An error is reported in ${name}`
            : `The report of an error in ${name} has a reply`,
        text: [
          what === "report"
            ? `A reader reports an error in ${name}${paper(told)}.`
            : `Whoever reported an error in ${name}${paper(told)} has replied.`,
          `Read it at ${publicUrl}/desk/reports/${report.id}`,
          "",
        ].join("\n\n"),
      },
      await readsBlindUntil(manager, person.id, report.constraintId, now),
    );
  }
}

/** To the address the reporter left, if any: where the answer will stand. Nothing they typed. */
export async function thankReporter(manager: EntityManager, told: Told): Promise<void> {
  await toReporter(manager, told, `Your report of an error in ${quotable(told)}`, [
    `Somebody, we hope you, reported an error in ${quotable(told)}${paper(told)}.`,
    "The editors will answer. If it was not you, do nothing: the address is forgotten by itself.",
  ]);
}

/** Answers and decisions, with what the editor wrote. */
export async function answerReporter(
  manager: EntityManager,
  told: Told,
  text: string | null,
  closed: Pick<ErrorReport, "outcome" | "correctedBy"> | null,
): Promise<void> {
  const outcome = closed?.outcome ? outcomeWords(closed.outcome, closed.correctedBy) : null;
  await toReporter(manager, told, `Your report of an error in ${quotable(told)} is answered`, [
    `You reported an error in ${quotable(told)}${paper(told)}.`,
    ...(outcome === null ? [] : [`The report is closed: ${outcome}.`]),
    ...(text === null ? [] : ["An editor writes:", quoted(text)]),
  ]);
}

async function toReporter(
  manager: EntityManager,
  { report, publicUrl }: Told,
  subject: string,
  paragraphs: readonly string[],
): Promise<void> {
  if (report.reporterEmail === null) return;
  const token = await reportToken(manager, report.id);
  await queueMail(manager, {
    to: report.reporterEmail,
    subject,
    text: [
      ...paragraphs,
      `The report, with its answers, stands at ${publicUrl}/report/${token}`,
      "Fogline",
      "",
    ].join("\n\n"),
  });
}
