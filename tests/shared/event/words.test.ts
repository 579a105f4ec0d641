import { EVENT_KINDS, eventName, eventSentence, type ToldEvent } from "~shared/event/words";

const FIRN = "Ottla Firn";
const told = (
  subject: string,
  detail: ToldEvent["detail"] = {},
  more: Partial<ToldEvent> = {},
) => ({
  who: FIRN,
  subject,
  person: null,
  to: null,
  detail,
  ...more,
});

/** Kind, event and its whole sentence. The sentences are this registry's own words. */
const SENTENCES: readonly (readonly [kind: string, event: ToldEvent, sentence: string])[] = [
  [
    "account.addressChanged",
    told("user:1", {}, { person: "Brisa Kelm" }),
    "Brisa Kelm changed the address of the account.",
  ],
  [
    "account.addressChangeStopped",
    told("user:1"),
    "Somebody objected to a change of address before it was made.",
  ],
  [
    "account.addressRestored",
    told("user:1", {}, { person: "Brisa Kelm" }),
    "Brisa Kelm objected to a change of address, and the old one was put back.",
  ],
  [
    "account.deleted",
    told("user:1", { credit: "named" }, { person: "Brisa Kelm" }),
    "Brisa Kelm deleted the account; contributions stay under the name.",
  ],
  [
    "account.deleted",
    told("user:1", { credit: "anonymous" }),
    "Somebody deleted the account; contributions stay without the name.",
  ],
  [
    "answer.accepted",
    told("FL-0042.1", { code: "levelMismatch" }),
    "Ottla Firn accepted the contributor's answer in FL-0042.1 (levelMismatch).",
  ],
  [
    "apiToken.made",
    told("user:1", { scopes: ["read", "fits"], ends: "2031-02-03" }),
    "Ottla Firn made an API token (read and fits) that ends on 2031-02-03.",
  ],
  ["apiToken.made", told("user:1"), "Ottla Firn made an API token."],
  ["apiToken.revoked", told("user:1"), "Ottla Firn revoked an API token of the own account."],
  [
    "authorCheck.answered",
    told("FL-0042.1", { verdict: "correct" }),
    "An author of the paper checked FL-0042.1 and called it correct.",
  ],
  [
    "authorCheck.answered",
    told("FL-0042.1", { verdict: "comments" }),
    "An author of the paper checked FL-0042.1 and commented.",
  ],
  ["authorCheck.closed", told("FL-0042.1"), "Ottla Firn closed the author's check of FL-0042.1."],
  ["authorCheck.revoked", told("FL-0042.1"), "Ottla Firn took back the link to check FL-0042.1."],
  [
    "authorCheck.sent",
    told("FL-0042.1"),
    "Ottla Firn asked an author of the paper to check FL-0042.1.",
  ],
  [
    "claim.handedOver",
    told("FL-0042.1", {}, { to: "Brisa Kelm" }),
    "Ottla Firn handed the claim on FL-0042.1 over to Brisa Kelm.",
  ],
  [
    "claim.handedOver",
    told("FL-0042.1"),
    "Ottla Firn handed the claim on FL-0042.1 over to another editor.",
  ],
  ["claim.made", told("FL-0042.1"), "Ottla Firn claimed FL-0042.1 to read it again."],
  ["claim.renewed", told("FL-0042.1"), "Ottla Firn lengthened the claim on FL-0042.1."],
  ["claim.released", told("FL-0042.1"), "Ottla Firn gave back the claim on FL-0042.1."],
  ["claim.lapsed", told("FL-0042.1", {}, { who: null }), "The claim on FL-0042.1 ended."],
  [
    "comment.replied",
    told("FL-0042.1", { field: "zRole" }),
    "Ottla Firn wrote about role of the redshift in FL-0042.1.",
  ],
  [
    "correlatedSet.approved",
    told("CS-0002.1", { members: ["FL-0001", "FL-0002", "FL-0003"] }),
    "Ottla Firn approved CS-0002.1 (FL-0001, FL-0002 and FL-0003).",
  ],
  ["correlatedSet.claimed", told("CS-0002.1"), "Ottla Firn claimed CS-0002.1 to read it again."],
  ["correlatedSet.claimLapsed", told("CS-0002.1"), "The claim on CS-0002.1 ended."],
  [
    "correlatedSet.claimReleased",
    told("CS-0002.1"),
    "Ottla Firn gave back the claim on CS-0002.1.",
  ],
  [
    "correlatedSet.discarded",
    told("CS-0002.1", { from: "draft" }),
    "Ottla Firn discarded the draft CS-0002.1.",
  ],
  [
    "correlatedSet.drafted",
    told("CS-0002.2", { follows: "CS-0002.1" }),
    "Ottla Firn began CS-0002.2 after CS-0002.1.",
  ],
  [
    "correlatedSet.readingCorrected",
    told("CS-0002.1", { row: 2, column: 3 }),
    "Ottla Firn corrected an entry of the second reading of CS-0002.1 (row 2, column 3).",
  ],
  [
    "correlatedSet.readingCorrected",
    told("CS-0002.1"),
    "Ottla Firn corrected the second reading of CS-0002.1.",
  ],
  [
    "correlatedSet.readingStored",
    told("CS-0002.1"),
    "Ottla Firn stored a second reading of CS-0002.1.",
  ],
  [
    "correlatedSet.returned",
    told("CS-0002.1"),
    "Ottla Firn returned CS-0002.1 to its contributor.",
  ],
  [
    "correlatedSet.submitted",
    told("CS-0002.1", { members: ["FL-0001", "FL-0002"] }),
    "Ottla Firn submitted CS-0002.1 (FL-0001 and FL-0002).",
  ],
  [
    "correlatedSet.withdrawn",
    told("CS-0002", { replacedBy: "CS-0004" }),
    "Ottla Firn withdrew CS-0002, which CS-0004 replaces.",
  ],
  ["correlatedSet.withdrawn", told("CS-0002"), "Ottla Firn withdrew CS-0002."],
  [
    "demonstration.seeded",
    told("registry"),
    "The program filled the registry with the invented demonstration.",
  ],
  [
    "method.added",
    told("method:foggyWing", { name: "Foggy wing" }),
    "Ottla Firn added Foggy wing to the method vocabulary.",
  ],
  [
    "method.changed",
    told("method:darkGaps", { familyBefore: "forestOpacity", family: "cmb" }),
    "Ottla Firn changed the method Dark gaps and moved it from Forest opacity to CMB.",
  ],
  ["method.changed", told("method:darkGaps"), "Ottla Firn changed the method Dark gaps."],
  [
    "method.retired",
    told("method:nearZones", { into: "method:darkPixels" }),
    "Ottla Firn retired the method Near zones; Dark pixels took it over.",
  ],
  ["namedData.added", told("data:Yewmoor field"), "Ottla Firn named the data Yewmoor field."],
  [
    "namedData.edited",
    told("data:Yewmoor field"),
    "Ottla Firn edited the named data Yewmoor field.",
  ],
  [
    "namedData.merged",
    told("data:Yewmoor", { into: "data:Yewmoor field" }),
    "Ottla Firn merged the named data Yewmoor into Yewmoor field.",
  ],
  [
    "namedData.related",
    told("data:Yewmoor", { to: "data:Heath" }),
    "Ottla Firn related the named data Yewmoor to Heath.",
  ],
  [
    "namedData.unrelated",
    told("data:Yewmoor"),
    "Ottla Firn took back how the named data Yewmoor relate to others.",
  ],
  [
    "reading.corrected",
    told("FL-0042.1", { field: "value" }),
    "Ottla Firn corrected the second reading of FL-0042.1 (value).",
  ],
  ["reading.stored", told("FL-0042.1"), "Ottla Firn stored a second reading of FL-0042.1."],
  [
    "record.errorReported",
    told("FL-0042", {}, { who: null }),
    "A reader reported an error in FL-0042.",
  ],
  [
    "record.erratum",
    told("FL-0042", { replacedBy: "FL-0050" }),
    "Ottla Firn recorded that FL-0042 has an erratum (now FL-0050).",
  ],
  [
    "record.noticeLifted",
    told("FL-0042", { notice: "superseded", replacedBy: "FL-0050" }),
    "Ottla Firn lifted the notice that FL-0042 is superseded (now FL-0050).",
  ],
  ["record.noticeLifted", told("FL-0042"), "Ottla Firn lifted the notice that FL-0042 carried."],
  ["record.superseded", told("FL-0042"), "Ottla Firn put FL-0042 out of use as superseded."],
  ["record.withdrawn", told("FL-0042"), "Ottla Firn withdrew FL-0042."],
  [
    "recusal.declared",
    told("paper:Arvensis2031"),
    "Ottla Firn left the paper Arvensis2031 to other editors.",
  ],
  [
    "recusal.takenBack",
    told("paper:Arvensis2031"),
    "Ottla Firn may read the paper Arvensis2031 again.",
  ],
  ["release.cut", told("release:3", { records: 60 }), "Ottla Firn cut release 3 of 60 records."],
  ["report.answered", told("FL-0042"), "Ottla Firn answered a reported error in FL-0042."],
  [
    "report.closed",
    told("FL-0042", { outcome: "noError" }),
    "Ottla Firn closed a reported error in FL-0042: there is no error.",
  ],
  ["report.closed", told("FL-0042"), "Ottla Firn closed a reported error in FL-0042."],
  [
    "report.replied",
    told("FL-0042", {}, { who: null }),
    "The reader replied about the error reported in FL-0042.",
  ],
  ["revision.approved", told("FL-0042.1"), "Ottla Firn approved FL-0042.1."],
  [
    "revision.discarded",
    told("FL-0042.1", { from: "submitted" }),
    "Ottla Firn took back FL-0042.1.",
  ],
  [
    "revision.drafted",
    told("FL-0042.1", { from: "import" }),
    "Ottla Firn began FL-0042.1 from an imported file.",
  ],
  ["revision.drafted", told("FL-0042.1"), "Ottla Firn began FL-0042.1."],
  [
    "revision.returned",
    told("FL-0042.1", { fields: ["value"] }),
    "Ottla Firn returned FL-0042.1 with comments (value).",
  ],
  [
    "revision.submitted",
    told("FL-0042.1", { citation: "Arvensis2031" }),
    "Ottla Firn submitted FL-0042.1, citing Arvensis2031.",
  ],
  [
    "revision.submitted",
    told("FL-0042.1", { citation: "Arvensis2031", evidence: ["a"] }),
    "Ottla Firn submitted FL-0042.1 with one file of evidence, citing Arvensis2031.",
  ],
  [
    "revision.submitted",
    told("FL-0042.1", { citation: "Arvensis2031", evidence: ["a", "b"] }),
    "Ottla Firn submitted FL-0042.1 with 2 files of evidence, citing Arvensis2031.",
  ],
  [
    "role.granted",
    told("user:1", { role: "editor" }, { who: null, person: "Brisa Kelm" }),
    "The program gave Brisa Kelm the editor role.",
  ],
  [
    "role.revoked",
    told("user:1", { role: "editor" }),
    "Ottla Firn took the editor role from somebody.",
  ],
  [
    "table.changed",
    told("table:wings", { visibility: "public" }),
    "Ottla Firn changed who may see the fitting table wings: public.",
  ],
  ["table.deleted", told("table:wings"), "Ottla Firn deleted the fitting table wings."],
  [
    "table.saved",
    told("table:wings", { version: 2, rowsIn: 14 }),
    "Ottla Firn saved version 2 of the fitting table wings with 14 rows.",
  ],
  [
    "table.saved",
    told("table:wings", { rowsIn: 14 }),
    "Ottla Firn saved the fitting table wings with 14 rows.",
  ],
];

it.each(SENTENCES)("%s of %j is told whole", (kind, event, sentence) => {
  expect(eventSentence(kind, event)).toBe(sentence);
});

it("every kind has its sentence above", () => {
  expect([...new Set(SENTENCES.map(([kind]) => kind))].sort()).toEqual(EVENT_KINDS);
});

it("an unknown kind and an unknown field are told by their own names", () => {
  expect(eventName("thing.done")).toBe("thing.done");
  expect(eventSentence("thing.done", told("FL-0042", {}, { who: null }))).toBe(
    "The program: thing.done of FL-0042.",
  );
  expect(eventSentence("comment.replied", told("FL-0042.1", { field: "moonPhase" }))).toBe(
    "Ottla Firn wrote about moonphase in FL-0042.1.",
  );
});
