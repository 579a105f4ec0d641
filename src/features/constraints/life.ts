import type { LifePartsFragment, NoticePartsFragment } from "~graphql/generated/graphql";
import { INVERSE_VERBS, RELATION_VERBS } from "~shared/dependence/relation";
import { conditionWord } from "~shared/statement/words";

type Relation = LifePartsFragment["relations"][number];
type Happened = LifePartsFragment["happened"][number];

/** What stands over a notice that holds: "Superseded by FL-0009". */
export function noticeTitle({ kind, replacedBy }: NoticePartsFragment): string {
  if (kind === "withdrawn") return "This record is withdrawn";
  if (kind === "erratum") return "There is an erratum to this record";
  return `This record is superseded by ${replacedBy ?? "another one"}`;
}

/** "Supersedes", "Is re-analysed in": the record's side of a relation. */
export function relationWord({ relation, inverse }: Relation): string {
  const verb = (inverse ? INVERSE_VERBS : RELATION_VERBS)[relation];
  return verb.charAt(0).toUpperCase() + verb.slice(1);
}

/** "CMB through FL-0007 and FL-0003": the end of a chain and the records on the way to it. */
export function chainEnd({ through, on }: LifePartsFragment["conditionChains"][number]): string {
  const way = through.slice(1);
  return way.length === 0
    ? conditionWord(on)
    : `${conditionWord(on)} through ${way.join(", then ")}`;
}

/** What an event did to the record. */
export function happenedWords({ kind, subject, replacedBy }: Happened): string {
  switch (kind) {
    case "revision.approved":
      return `${subject} was approved`;
    case "record.erratum":
      return "An erratum was recorded";
    case "record.superseded":
      return `Superseded by ${replacedBy ?? "another record"}`;
    case "record.withdrawn":
      return "Withdrawn";
    case "record.noticeLifted":
      return replacedBy ? `No longer superseded by ${replacedBy}` : "A notice was taken back";
    default:
      return kind;
  }
}
