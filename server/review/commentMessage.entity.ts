import {
  Column,
  Entity,
  Index,
  JoinColumn,
  ManyToOne,
  PrimaryGeneratedColumn,
  type Relation,
} from "typeorm";

import { FieldCommentRecord } from "./comment.entity";

/** What was written below a comment after its first answer, by an editor or the contributor. */
@Entity("comment_message")
export class CommentMessage {
  @PrimaryGeneratedColumn({ type: "int", unsigned: true })
  id!: number;

  @Index("messages_of_comment")
  @Column({ type: "uuid" })
  commentId!: string;

  @ManyToOne(() => FieldCommentRecord, { onDelete: "CASCADE" })
  @JoinColumn({ name: "commentId" })
  comment!: Relation<FieldCommentRecord>;

  @Column({ type: "uuid" })
  byId!: string;

  @Column({ type: "text" })
  text!: string;

  @Column({ type: "datetime", precision: 6 })
  at!: Date;
}
