import { MailToken } from "~server/account/mailToken.entity";
import { RoleGrant } from "~server/account/roleGrant.entity";
import { User } from "~server/account/user.entity";
import { Citation, CitationGate } from "~server/citation/citation.entity";
import { EventHead, EventRecord } from "~server/event/event.entity";
import { CaughtMailRow } from "~server/mail/caughtMail.entity";
import { OutboxMail } from "~server/mail/outboxMail.entity";
import { RateLimitRow } from "~server/security/rateLimit.entity";
import { SessionRow } from "~server/http/session.entity";

import { Setting } from "./setting.entity";

/** Every entity of the server; each folder adds its own here. */
export const entities = [
  User,
  RoleGrant,
  MailToken,
  OutboxMail,
  CaughtMailRow,
  SessionRow,
  RateLimitRow,
  Setting,
  Citation,
  CitationGate,
  EventRecord,
  EventHead,
];
