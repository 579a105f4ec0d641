import { MailToken } from "~server/account/mailToken.entity";
import { RoleGrant } from "~server/account/roleGrant.entity";
import { User } from "~server/account/user.entity";
import { ApiToken } from "~server/apiToken/apiToken.entity";
import { AuthorCheck, AuthorCheckEntry } from "~server/authorCheck/authorCheck.entity";
import { Citation, CitationGate } from "~server/citation/citation.entity";
import { Constraint } from "~server/constraint/constraint.entity";
import { Revision, RevisionData } from "~server/constraint/revision.entity";
import { RelationGate, RevisionLink } from "~server/constraint/revisionLink.entity";
import { CorrelatedSet, SetReading } from "~server/correlatedSet/correlatedSet.entity";
import { ErrorReport, ErrorReportMessage } from "~server/errorReport/errorReport.entity";
import { EventHead, EventRecord } from "~server/event/event.entity";
import { Evidence, EvidenceChunk, EvidenceFile } from "~server/evidence/evidence.entity";
import { ImportMatch } from "~server/import/importMatch.entity";
import { CaughtMailRow } from "~server/mail/caughtMail.entity";
import { OutboxMail } from "~server/mail/outboxMail.entity";
import { MethodRow } from "~server/method/method.entity";
import { NamedData, NamedDataAlias, NamedDataRelation } from "~server/namedData/namedData.entity";
import { RecordNotice } from "~server/recordLife/recordNotice.entity";
import { FieldCommentRecord } from "~server/review/comment.entity";
import { CommentMessage } from "~server/review/commentMessage.entity";
import { Recusal } from "~server/review/recusal.entity";
import { Reading } from "~server/review/reading.entity";
import { Release, ReleaseRow } from "~server/release/release.entity";
import { RateLimitRow } from "~server/security/rateLimit.entity";
import { SavedTable } from "~server/table/table.entity";
import { TableVersion, TableVersionRow } from "~server/table/tableVersion.entity";
import { Upload } from "~server/upload/upload.entity";
import { SessionRow } from "~server/http/session.entity";

import { Setting } from "./setting.entity";

/** Every entity of the server; each folder adds its own here. */
export const entities = [
  User,
  RoleGrant,
  MailToken,
  ApiToken,
  OutboxMail,
  CaughtMailRow,
  SessionRow,
  RateLimitRow,
  Setting,
  Citation,
  CitationGate,
  Upload,
  ImportMatch,
  EventRecord,
  EventHead,
  Constraint,
  Revision,
  RevisionData,
  RevisionLink,
  RelationGate,
  MethodRow,
  NamedData,
  NamedDataAlias,
  NamedDataRelation,
  RecordNotice,
  Reading,
  FieldCommentRecord,
  CommentMessage,
  Recusal,
  AuthorCheck,
  AuthorCheckEntry,
  SavedTable,
  TableVersion,
  TableVersionRow,
  Release,
  ReleaseRow,
  ErrorReport,
  ErrorReportMessage,
  CorrelatedSet,
  SetReading,
  EvidenceFile,
  EvidenceChunk,
  Evidence,
];
