import { createUnionType, Field, Int, ObjectType } from "type-graphql";

import { Refusal } from "~server/common/outcomes";
import { FieldChange } from "~server/constraint/constraint.type";
import { REGISTRY } from "~server/download/header";
import { EventMark, eventMark } from "~server/event/event.type";
import { RecordNoticeType } from "~server/recordLife/life.type";
import {
  releaseBibtex,
  releaseCff,
  releaseCsl,
  type CitedRelease,
} from "~shared/formats/releaseCitation";

import type { Release as ReleaseEntity } from "./release.entity";

@ObjectType({ description: "How to cite a release." })
export class ReleaseCitation {
  @Field(() => String) bibtex!: string;
  @Field(() => String, { description: "CSL-JSON, as text." }) csl!: string;
  @Field(() => String, { description: "A CITATION.cff file." }) cff!: string;
}

@ObjectType({ description: "A numbered snapshot of all approved records that never changes." })
export class Release {
  @Field(() => Int, { description: "Counts from 1." }) number!: number;
  @Field(() => Date) cutAt!: Date;
  @Field(() => String) cutBy!: string;
  @Field(() => String) notes!: string;
  @Field(() => String, {
    description: "Hexadecimal SHA-256 over the RFC 8785 form of its content.",
  })
  digest!: string;
  @Field(() => Int) records!: number;
  @Field(() => String) licence!: string;
  @Field(() => EventMark) lastEvent!: EventMark;
  @Field(() => ReleaseCitation) citation!: ReleaseCitation;
}

@ObjectType({ description: "What was recorded about a record of a release since it was cut." })
export class ReleaseNotice {
  @Field(() => String, { description: "FL-0042" }) number!: string;
  @Field(() => RecordNoticeType) notice!: RecordNoticeType;
}

@ObjectType()
export class ReleasedRecord {
  @Field(() => String) number!: string;
  @Field(() => String, { description: "Number with revision." }) quotable!: string;
  @Field(() => String) shortName!: string;
}

@ObjectType()
export class ChangedRecord extends ReleasedRecord {
  @Field(() => String, { description: "Its revision in the earlier release." }) before!: string;
  @Field(() => [FieldChange]) changes!: FieldChange[];
}

@ObjectType()
export class ReleaseDifference {
  @Field(() => [ReleasedRecord]) added!: ReleasedRecord[];
  @Field(() => [ReleasedRecord]) removed!: ReleasedRecord[];
  @Field(() => [ChangedRecord]) changed!: ChangedRecord[];
}

@ObjectType({ description: "What stands against a release now, and what it would hold." })
export class ReleaseReadiness {
  @Field(() => [String], { description: "Sentences; empty when it can be cut." })
  blockers!: string[];
  @Field(() => Int) records!: number;
  @Field(() => Int, { nullable: true }) latest!: number | null;
}

export const ReleaseResult = createUnionType({
  name: "ReleaseResult",
  types: () => [Release, Refusal] as const,
});

export function releaseAddress(publicUrl: string, number: number): string {
  return `${publicUrl}/releases/${number}`;
}

export function citedRelease(release: ReleaseEntity, publicUrl: string): CitedRelease {
  return {
    registry: REGISTRY,
    number: release.number,
    date: release.cutAt.toISOString().slice(0, 10),
    address: releaseAddress(publicUrl, release.number),
    digest: release.digest,
    licence: release.licence,
    demonstration: release.demonstration,
  };
}

export function releaseType(release: ReleaseEntity, publicUrl: string): Release {
  const cited = citedRelease(release, publicUrl);
  return Object.assign(new Release(), {
    number: release.number,
    cutAt: release.cutAt,
    cutBy: release.cutBy.nameOnPapers,
    notes: release.notes,
    digest: release.digest,
    records: release.records,
    licence: release.licence,
    lastEvent: eventMark({
      sequence: release.lastEventSequence,
      digest: release.lastEventDigest,
      at: release.lastEventAt,
    }),
    citation: Object.assign(new ReleaseCitation(), {
      bibtex: releaseBibtex(cited),
      csl: releaseCsl(cited),
      cff: releaseCff(cited),
    }),
  });
}
