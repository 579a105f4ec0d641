import { createUnionType, Field, ID, InputType, Int, ObjectType } from "type-graphql";

import { Refusal } from "~server/common/outcomes";
import { ConstraintFieldsType } from "~server/constraint/fields.type";

@InputType()
export class ImportColumnMatch {
  @Field(() => String) column!: string;
  @Field(() => String, { nullable: true }) field?: string | null;
}

@InputType()
export class ImportWordMatch {
  @Field(() => String) field!: string;
  @Field(() => String) word!: string;
  @Field(() => String, { nullable: true }) value?: string | null;
}

@InputType()
export class ImportInput {
  @Field(() => ID) csvUploadId!: string;
  @Field(() => ID) bibUploadId!: string;
  @Field(() => [ImportColumnMatch], { nullable: true }) columns?: ImportColumnMatch[] | null;
  @Field(() => [ImportWordMatch], { nullable: true }) words?: ImportWordMatch[] | null;
}

@ObjectType()
export class ImportColumn {
  @Field(() => String) column!: string;
  @Field(() => String, { nullable: true }) proposedField!: string | null;
  @Field(() => [String]) sample!: string[];
}

@ObjectType()
export class ImportWord {
  @Field(() => String) field!: string;
  @Field(() => String) word!: string;
  @Field(() => String, { nullable: true }) proposed!: string | null;
  @Field(() => [String]) choices!: string[];
}

@ObjectType()
export class ImportRefusal {
  @Field(() => String) file!: string;
  @Field(() => Int) line!: number;
  @Field(() => String, { nullable: true }) column!: string | null;
  @Field(() => String) reason!: string;
}

@ObjectType()
export class ImportRow {
  @Field(() => Int) line!: number;
  @Field(() => String) key!: string;
  @Field(() => String, { nullable: true }) citationShortName!: string | null;
  @Field(() => ConstraintFieldsType, { nullable: true }) fields!: ConstraintFieldsType | null;
  @Field(() => [String]) openFields!: string[];
  @Field(() => String) grade!: string;
  @Field(() => String, { description: "good, refused or already here" }) outcome!: string;
  @Field(() => [ImportRefusal]) refusals!: ImportRefusal[];
}

@ObjectType()
export class ImportPreview {
  @Field(() => Int) good!: number;
  @Field(() => Int) refused!: number;
  @Field(() => Int) alreadyHere!: number;
  @Field(() => Boolean) remembered!: boolean;
  @Field(() => [ImportColumn]) columns!: ImportColumn[];
  @Field(() => [ImportWord]) words!: ImportWord[];
  @Field(() => [ImportRow]) rows!: ImportRow[];
}

@ObjectType()
export class ImportDone {
  @Field(() => Int) created!: number;
  @Field(() => Int) alreadyHere!: number;
  @Field(() => Int) refused!: number;
  @Field(() => [ID]) submissionIds!: string[];
}

export const ImportPreviewResult = createUnionType({
  name: "ImportPreviewResult",
  types: () => [ImportPreview, Refusal] as const,
});

export const ImportResult = createUnionType({
  name: "ImportResult",
  types: () => [ImportDone, Refusal] as const,
});
