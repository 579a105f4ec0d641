import { createUnionType, Field, ID, Int, ObjectType } from "type-graphql";

import { EvidenceKindEnum } from "~server/common/enums";
import { Refusal } from "~server/common/outcomes";
import type { EvidenceKind } from "~shared/evidence/evidence";

import type { Evidence } from "./evidence.entity";

@ObjectType("Evidence", {
  description:
    "A file kept with a revision. Everybody learns that an approved one keeps it; what it is called, says and holds only who may see it.",
})
export class EvidenceType {
  @Field(() => EvidenceKindEnum) kind!: EvidenceKind;
  @Field(() => Int) bytes!: number;
  @Field(() => String, { description: "SHA-256 of its bytes." }) digest!: string;
  @Field(() => ID, { nullable: true }) id!: string | null;
  @Field(() => String, { nullable: true }) name!: string | null;
  @Field(() => String, { nullable: true }) caption!: string | null;
  @Field(() => Date, { nullable: true }) uploadedAt!: Date | null;
  @Field(() => String, { nullable: true, description: "Where the file itself is." })
  address!: string | null;
}

export const EvidenceResult = createUnionType({
  name: "EvidenceResult",
  types: () => [EvidenceType, Refusal] as const,
});

/** @param open - Whether the viewer may see the file. */
export function evidenceType(evidence: Evidence, open: boolean): EvidenceType {
  const { id, name, caption, at, digest, file } = evidence;
  return Object.assign(new EvidenceType(), {
    ...{ kind: file.kind, bytes: file.bytes, digest },
    id: open ? id : null,
    name: open ? name : null,
    caption: open ? caption : null,
    uploadedAt: open ? at : null,
    address: open ? `/api/evidence/${id}` : null,
  });
}
