/** What each kind of event says in a sentence; the log is read in these words. */
import { FAMILY_NAMES, type MethodFamily } from "~shared/methods/vocabulary";
import { type FieldName } from "~shared/statement/fields";
import { FIELD_NAMES, tagName } from "~shared/statement/words";

/** An event as its sentence needs it. */
export interface ToldEvent {
  /** Who did it, by name; null for the program itself. */
  who: string | null;
  /** What it happened to: "FL-0042.1", "table:abc", "user:<id>". */
  subject: string;
  /** Name of the person that the subject is; null when it is none. */
  person: string | null;
  /** Name of the person that the detail `to` is; null when it is none. */
  to: string | null;
  /** Facts of the change. */
  detail: Readonly<Record<string, unknown>>;
}

export interface EventWords {
  /** Short name of the kind, for a list to choose from. */
  name: string;
  sentence(event: ToldEvent): string;
}

const PROGRAM = "The program";
const by = ({ who }: ToldEvent): string => who ?? PROGRAM;

/** Text of a detail; empty when it is missing. */
function text({ detail }: ToldEvent, name: string): string {
  const value = detail[name];
  return typeof value === "string" || typeof value === "number" ? String(value) : "";
}

function list({ detail }: ToldEvent, name: string): string[] {
  const value = detail[name];
  return Array.isArray(value) ? value.filter((one) => typeof one === "string") : [];
}

const fieldName = (name: string): string => (FIELD_NAMES[name as FieldName] ?? name).toLowerCase();

/** " (a, b and c)", or nothing. */
function inBrackets(words: readonly string[]): string {
  return words.length === 0 ? "" : ` (${joined(words)})`;
}

function joined(words: readonly string[]): string {
  return words.length < 2
    ? words.join("")
    : `${words.slice(0, -1).join(", ")} and ${words.at(-1) ?? ""}`;
}

/** The table's, release's or other thing's own name behind the colon of a subject. */
const thing = (event: ToldEvent): string => event.subject.slice(event.subject.indexOf(":") + 1);

/** The same of something that the detail names. */
function otherThing(event: ToldEvent, name: string): string {
  const other = text(event, name);
  return other === "" ? "others" : other.slice(other.indexOf(":") + 1);
}

const methodName = (event: ToldEvent): string => text(event, "name") || tagName(thing(event));
const familyName = (family: string): string => FAMILY_NAMES[family as MethodFamily] ?? family;

const person = (event: ToldEvent): string => event.person ?? "somebody";
const thePerson = (event: ToldEvent): string => event.person ?? "Somebody";

/** "Brisa Kelm claimed FL-0042.1." */
const plain = (name: string, verb: string, after = ""): EventWords => ({
  name,
  sentence: (event) => `${by(event)} ${verb} ${event.subject}${after}.`,
});

const words = (name: string, sentence: EventWords["sentence"]): EventWords => ({ name, sentence });

function from(event: ToldEvent): string {
  const state = text(event, "from");
  return state === "submitted" ? "took back" : "discarded the draft";
}

const OUTCOMES: Record<string, string> = {
  corrected: "it was corrected",
  erratumRecorded: "an erratum was recorded",
  noError: "there is no error",
  passedToAuthors: "it was passed on to the authors",
};

const EVENT_WORDS: Readonly<Record<string, EventWords>> = {
  "account.addressChanged": words(
    "Address changed",
    (event) => `${thePerson(event)} changed the address of the account.`,
  ),
  "account.addressChangeStopped": words(
    "Change of address stopped",
    (event) => `${thePerson(event)} objected to a change of address before it was made.`,
  ),
  "account.addressRestored": words(
    "Address put back",
    (event) => `${thePerson(event)} objected to a change of address, and the old one was put back.`,
  ),
  "account.deleted": words(
    "Account deleted",
    (event) =>
      `${thePerson(event)} deleted the account; contributions stay ` +
      `${text(event, "credit") === "named" ? "under the name" : "without the name"}.`,
  ),
  "apiToken.made": words("Token made", (event) => {
    const ends = text(event, "ends");
    const until = ends === "" ? "" : ` that ends on ${ends}`;
    return `${by(event)} made an API token${inBrackets(list(event, "scopes"))}${until}.`;
  }),
  "apiToken.revoked": words(
    "Token revoked",
    (event) => `${by(event)} revoked an API token of the own account.`,
  ),
  "answer.accepted": words(
    "Answer accepted",
    (event) =>
      `${by(event)} accepted the contributor's answer in ${event.subject} (${text(event, "code")}).`,
  ),
  "authorCheck.answered": words("Author answered", (event) => {
    const said = text(event, "verdict") === "correct" ? "called it correct" : "commented";
    return `An author of the paper checked ${event.subject} and ${said}.`;
  }),
  "authorCheck.closed": plain("Author check closed", "closed the author's check of"),
  "authorCheck.revoked": plain("Author check revoked", "took back the link to check"),
  "authorCheck.sent": plain("Author asked", "asked an author of the paper to check"),
  "claim.handedOver": words(
    "Claim handed over",
    (event) =>
      `${by(event)} handed the claim on ${event.subject} over to ${event.to ?? "another editor"}.`,
  ),
  "claim.made": plain("Claim made", "claimed", " to read it again"),
  "claim.renewed": plain("Claim lengthened", "lengthened the claim on"),
  "claim.released": plain("Claim given back", "gave back the claim on"),
  "claim.lapsed": words("Claim ended", (event) => `The claim on ${event.subject} ended.`),
  "comment.replied": words(
    "Comment replied to",
    (event) => `${by(event)} wrote about ${fieldName(text(event, "field"))} in ${event.subject}.`,
  ),
  "correlatedSet.approved": words(
    "Set approved",
    (event) => `${by(event)} approved ${event.subject}${inBrackets(list(event, "members"))}.`,
  ),
  "correlatedSet.claimed": plain("Set claimed", "claimed", " to read it again"),
  "correlatedSet.claimLapsed": words(
    "Claim of a set ended",
    (event) => `The claim on ${event.subject} ended.`,
  ),
  "correlatedSet.claimReleased": plain("Claim of a set given back", "gave back the claim on"),
  "correlatedSet.discarded": words(
    "Set discarded",
    (event) => `${by(event)} ${from(event)} ${event.subject}.`,
  ),
  "correlatedSet.drafted": words("Set drafted", (event) => drafted(event)),
  "correlatedSet.readingCorrected": words("Reading of a set corrected", (event) =>
    text(event, "row") === ""
      ? `${by(event)} corrected the second reading of ${event.subject}.`
      : `${by(event)} corrected an entry of the second reading of ${event.subject} ` +
        `(row ${text(event, "row")}, column ${text(event, "column")}).`,
  ),
  "correlatedSet.readingStored": plain("Set read again", "stored a second reading of"),
  "correlatedSet.returned": plain("Set returned", "returned", " to its contributor"),
  "correlatedSet.submitted": words(
    "Set submitted",
    (event) => `${by(event)} submitted ${event.subject}${inBrackets(list(event, "members"))}.`,
  ),
  "correlatedSet.withdrawn": words("Set withdrawn", (event) => {
    const next = text(event, "replacedBy");
    return `${by(event)} withdrew ${event.subject}${next && `, which ${next} replaces`}.`;
  }),
  "demonstration.seeded": words(
    "Demonstration seeded",
    () => "The program filled the registry with the invented demonstration.",
  ),
  "method.added": words(
    "Method added",
    (event) => `${by(event)} added ${methodName(event)} to the method vocabulary.`,
  ),
  "method.changed": words("Method changed", (event) => {
    const [before, family] = [text(event, "familyBefore"), text(event, "family")];
    const moved =
      before === "" ? "" : ` and moved it from ${familyName(before)} to ${familyName(family)}`;
    return `${by(event)} changed the method ${methodName(event)}${moved}.`;
  }),
  "method.retired": words(
    "Method retired",
    (event) =>
      `${by(event)} retired the method ${methodName(event)}; ` +
      `${tagName(otherThing(event, "into"))} took it over.`,
  ),
  "namedData.added": words("Data named", (event) => `${by(event)} named the data ${thing(event)}.`),
  "namedData.edited": words(
    "Named data edited",
    (event) => `${by(event)} edited the named data ${thing(event)}.`,
  ),
  "namedData.merged": words(
    "Named data merged",
    (event) =>
      `${by(event)} merged the named data ${thing(event)} into ${otherThing(event, "into")}.`,
  ),
  "namedData.related": words(
    "Named data related",
    (event) => `${by(event)} related the named data ${thing(event)} to ${otherThing(event, "to")}.`,
  ),
  "namedData.unrelated": words(
    "Relation of data taken back",
    (event) =>
      `${by(event)} took back how the named data ${thing(event)} relate to ${otherThing(event, "to")}.`,
  ),
  "reading.corrected": words(
    "Reading corrected",
    (event) =>
      `${by(event)} corrected the second reading of ${event.subject} ` +
      `(${fieldName(text(event, "field"))}).`,
  ),
  "reading.stored": plain("Read again", "stored a second reading of"),
  "record.errorReported": words(
    "Error reported",
    (event) => `${event.who ?? "A reader"} reported an error in ${event.subject}.`,
  ),
  "record.erratum": words(
    "Erratum recorded",
    (event) => `${by(event)} recorded that ${event.subject} has an erratum${replacedBy(event)}.`,
  ),
  "record.noticeLifted": words(
    "Notice lifted",
    (event) =>
      `${by(event)} lifted the notice that ${event.subject} ${NOTICES[text(event, "notice")] ?? "carried"}${replacedBy(event)}.`,
  ),
  "record.superseded": words(
    "Record superseded",
    (event) => `${by(event)} put ${event.subject} out of use as superseded${replacedBy(event)}.`,
  ),
  "record.withdrawn": words(
    "Record withdrawn",
    (event) => `${by(event)} withdrew ${event.subject}.`,
  ),
  "recusal.declared": words(
    "Paper left to others",
    (event) => `${by(event)} left the paper ${thing(event)} to other editors.`,
  ),
  "recusal.takenBack": words(
    "Recusal taken back",
    (event) => `${by(event)} may read the paper ${thing(event)} again.`,
  ),
  "release.cut": words(
    "Release cut",
    (event) => `${by(event)} cut release ${thing(event)} of ${text(event, "records")} records.`,
  ),
  "report.answered": plain("Report answered", "answered a reported error in"),
  "report.closed": words("Report closed", (event) => {
    const outcome = OUTCOMES[text(event, "outcome")];
    return `${by(event)} closed a reported error in ${event.subject}${outcome ? `: ${outcome}` : ""}.`;
  }),
  "report.replied": words(
    "Report replied to",
    (event) => `${event.who ?? "The reader"} replied about the error reported in ${event.subject}.`,
  ),
  "revision.approved": plain("Approved", "approved"),
  "revision.discarded": words(
    "Discarded",
    (event) => `${by(event)} ${from(event)} ${event.subject}.`,
  ),
  "revision.drafted": words("Drafted", (event) => drafted(event)),
  "revision.returned": words(
    "Returned",
    (event) =>
      `${by(event)} returned ${event.subject} with comments` +
      `${inBrackets(list(event, "fields").map(fieldName))}.`,
  ),
  "revision.submitted": words("Submitted", (event) => {
    const files = list(event, "evidence").length;
    const kept =
      files === 0 ? "" : ` with ${files === 1 ? "one file" : `${files} files`} of evidence`;
    return `${by(event)} submitted ${event.subject}${kept}, citing ${text(event, "citation")}.`;
  }),
  "role.granted": words(
    "Role granted",
    (event) => `${by(event)} gave ${person(event)} the ${text(event, "role")} role.`,
  ),
  "role.revoked": words(
    "Role revoked",
    (event) => `${by(event)} took the ${text(event, "role")} role from ${person(event)}.`,
  ),
  "table.changed": words(
    "Table's visibility changed",
    (event) =>
      `${by(event)} changed who may see the fitting table ${thing(event)}: ${text(event, "visibility")}.`,
  ),
  "table.deleted": words(
    "Table deleted",
    (event) => `${by(event)} deleted the fitting table ${thing(event)}.`,
  ),
  "table.saved": words("Table saved", (event) => {
    const version = text(event, "version");
    return `${by(event)} saved ${version && `version ${version} of `}the fitting table ${thing(event)} with ${text(event, "rowsIn")} rows.`;
  }),
};

function drafted(event: ToldEvent): string {
  const follows = text(event, "follows");
  if (follows !== "") return `${by(event)} began ${event.subject} after ${follows}.`;
  const imported = text(event, "from") === "import" ? " from an imported file" : "";
  return `${by(event)} began ${event.subject}${imported}.`;
}

const NOTICES: Record<string, string> = {
  erratum: "has an erratum",
  superseded: "is superseded",
  withdrawn: "is withdrawn",
};

function replacedBy(event: ToldEvent): string {
  const number = text(event, "replacedBy");
  return number === "" ? "" : ` (now ${number})`;
}

/** Every kind that has its words, in alphabetical order. */
export const EVENT_KINDS: readonly string[] = Object.keys(EVENT_WORDS).sort();

/** Short name of a kind; the kind itself where an older program wrote one that is unknown today. */
export function eventName(kind: string): string {
  return EVENT_WORDS[kind]?.name ?? kind;
}

/** What happened, in a sentence. */
export function eventSentence(kind: string, event: ToldEvent): string {
  return EVENT_WORDS[kind]?.sentence(event) ?? `${by(event)}: ${kind} of ${event.subject}.`;
}
