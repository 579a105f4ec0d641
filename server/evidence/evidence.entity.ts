import {
  Column,
  Entity,
  Index,
  JoinColumn,
  ManyToOne,
  PrimaryColumn,
  PrimaryGeneratedColumn,
  Unique,
  type Relation,
} from "typeorm";

import { Revision } from "~server/constraint/revision.entity";
import { EVIDENCE_LIMITS, type EvidenceKind } from "~shared/evidence/evidence";

/** A file's content, kept once however many revisions it belongs to. */
@Entity("evidence_file")
export class EvidenceFile {
  /** SHA-256 of the bytes, in hex. */
  @PrimaryColumn({ type: "char", length: 64 })
  digest!: string;

  /** As found in the content. */
  @Column({ type: "varchar", length: 8 })
  kind!: EvidenceKind;

  @Column({ type: "int", unsigned: true })
  bytes!: number;
}

/** A piece of a file. In the database, so that a backup keeps it; small enough for any packet limit. */
@Entity("evidence_chunk")
export class EvidenceChunk {
  @PrimaryColumn({ type: "char", length: 64 })
  digest!: string;

  /** Counts from 0. */
  @PrimaryColumn({ type: "int", unsigned: true })
  ordinal!: number;

  @ManyToOne(() => EvidenceFile, { onDelete: "CASCADE" })
  @JoinColumn({ name: "digest" })
  file!: Relation<EvidenceFile>;

  @Column({ type: "mediumblob" })
  data!: Buffer;
}

/** A file attached to a revision: what of the paper it shows. Unchanged once the revision is submitted. */
@Entity("evidence")
@Unique("one_file_once", ["revisionId", "digest"])
export class Evidence {
  @PrimaryGeneratedColumn("uuid")
  id!: string;

  @Column({ type: "uuid" })
  revisionId!: string;

  @ManyToOne(() => Revision, { onDelete: "CASCADE" })
  @JoinColumn({ name: "revisionId" })
  revision!: Relation<Revision>;

  @Index()
  @Column({ type: "char", length: 64 })
  digest!: string;

  @ManyToOne(() => EvidenceFile, { onDelete: "RESTRICT" })
  @JoinColumn({ name: "digest" })
  file!: Relation<EvidenceFile>;

  @Column({ type: "varchar", length: EVIDENCE_LIMITS.name })
  name!: string;

  @Column({ type: "varchar", length: EVIDENCE_LIMITS.caption })
  caption!: string;

  @Column({ type: "uuid" })
  uploadedById!: string;

  @Column({ type: "datetime", precision: 6 })
  at!: Date;
}
