import {
  createUnionType,
  Field,
  Float,
  ID,
  InputType,
  Int,
  ObjectType,
  registerEnumType,
} from "type-graphql";

import { Refusal } from "~server/common/outcomes";
import { ConstraintFilterInput, ConstraintType } from "~server/constraint/constraint.type";
import { EventMark } from "~server/event/event.type";
import { FORM_NAMES, type FormName } from "~shared/likelihood";
import { DECISION_KINDS, type DecisionKind } from "~shared/table/decision";

import { VISIBILITIES, type Visibility } from "./table.entity";

function enumOf<T extends string>(name: string, words: readonly T[], description: string) {
  const map = Object.fromEntries(words.map((word) => [word, word])) as Record<T, T>;
  registerEnumType(map, { name, description });
  return map;
}

export const VisibilityEnum = enumOf<Visibility>(
  "TableVisibility",
  VISIBILITIES,
  "private: its owner; link: who has the address; public: everybody, and it is listed.",
);
export const DecisionKindEnum = enumOf<DecisionKind>(
  "DecisionKind",
  DECISION_KINDS,
  "What a table has to settle before it is complete.",
);
export const FormNameEnum = enumOf<FormName>(
  "LikelihoodForm",
  FORM_NAMES,
  "How a statement becomes a likelihood.",
);
const TREATMENTS = ["point", "binMean", "averagedLikelihood"] as const;
export type Treatment = (typeof TREATMENTS)[number];
export const TreatmentEnum = enumOf<Treatment>(
  "RedshiftTreatment",
  TREATMENTS,
  "How a history's redshift range meets a row.",
);

@ObjectType("SettledRow")
export class SettledRowType {
  @Field(() => String, { description: "FL-0042" }) number!: string;
  @Field(() => Boolean) included!: boolean;
  @Field(() => String, { nullable: true, description: "Why it is out, or in against a proposal." })
  reason!: string | null;
  @Field(() => Boolean, { description: "False where a person chose otherwise than proposed." })
  proposed!: boolean;
  @Field(() => [String], { description: "Ids of open decisions about it." }) open!: string[];
  @Field(() => [String]) cautions!: string[];
  @Field(() => FormNameEnum, { nullable: true }) form!: FormName | null;
  @Field(() => [FormNameEnum], { description: "Forms that fit it, the default first." })
  forms!: FormName[];
  @Field(() => String, { nullable: true, description: "Its -2 ln L with the row's numbers." })
  formula!: string | null;
  @Field(() => String, { nullable: true, description: "Why another form than the default." })
  formReason!: string | null;
  @Field(() => TreatmentEnum, { nullable: true }) redshift!: Treatment | null;
  @Field(() => Float, { nullable: true, description: "As printed or decided, a probability." })
  level!: number | null;
  @Field(() => Float, { description: "Share in the mixture of its alternatives, else 1." })
  weight!: number;
  @Field(() => String, { nullable: true }) mixture!: string | null;
  @Field(() => String, { nullable: true, description: "Number of its correlated set." })
  set!: string | null;
}

@ObjectType()
export class DecisionOption {
  @Field(() => String) code!: string;
  @Field(() => String) words!: string;
  @Field(() => Boolean, { description: "Goes against a rule: it always needs a reason." })
  override!: boolean;
}

@ObjectType({
  description: "What a table has to settle, its options, the proposal and what was taken.",
})
export class TableDecision {
  @Field(() => ID) id!: string;
  @Field(() => DecisionKindEnum) kind!: DecisionKind;
  @Field(() => [String]) rows!: string[];
  @Field(() => String) words!: string;
  @Field(() => [DecisionOption]) options!: DecisionOption[];
  @Field(() => String) proposed!: string;
  @Field(() => String, { description: "Why it is proposed." }) because!: string;
  @Field(() => String, { nullable: true, description: "Option taken; null while it is open." })
  taken!: string | null;
  @Field(() => Boolean, { description: "Taken as proposed, by nobody in particular." })
  byDefault!: boolean;
  @Field(() => String, { nullable: true }) reason!: string | null;
}

@ObjectType()
export class TableMixture {
  @Field(() => String) label!: string;
  @Field(() => [String]) members!: string[];
  @Field(() => Float, { nullable: true, description: "Of the equal mixture on the real line." })
  standardDeviation!: number | null;
}

@ObjectType()
export class TableCorrelation {
  @Field(() => ID, { description: "Number of the set." }) id!: string;
  @Field(() => String) label!: string;
  @Field(() => [String]) members!: string[];
  @Field(() => [[Float]]) rho!: number[][];
  @Field(() => Boolean, { description: "False for the exact marginal of a part." }) whole!: boolean;
}

@ObjectType({ description: "A recipe followed: rows in and out, and what is still to be decided." })
export class TableProposal {
  @Field(() => [SettledRowType]) rows!: SettledRowType[];
  @Field(() => [ConstraintType]) constraints!: ConstraintType[];
  @Field(() => [TableDecision]) decisions!: TableDecision[];
  @Field(() => Int, { description: "Decisions still open; a table is complete at none." })
  open!: number;
  @Field(() => [TableMixture]) mixtures!: TableMixture[];
  @Field(() => [TableCorrelation]) sets!: TableCorrelation[];
  @Field(() => String) filter!: string;
  @Field(() => EventMark) lastEvent!: EventMark;
}

@ObjectType({ description: "Two records that share data directly." })
export class SharedDataPair {
  @Field(() => String) a!: string;
  @Field(() => String) b!: string;
  @Field(() => String, { description: "What they share, in words." }) via!: string;
}

@ObjectType({ description: "Something a record is conditioned on, directly or through others." })
export class ConditionWay {
  @Field(() => [String], { description: "Records on the way, the record itself first." })
  through!: string[];
  @Field(() => String, { description: "Kind of data, or number of a record, at its end." })
  on!: string;
}

@ObjectType("TableSurroundings", {
  description: "What the registry knows of records beside their own content.",
})
export class TableSurroundingsType {
  @Field(() => [SharedDataPair]) overlaps!: SharedDataPair[];
  @Field(() => [ConditionWay]) conditions!: ConditionWay[];
}

@ObjectType()
export class TableVersionMark {
  @Field(() => Int) version!: number;
  @Field(() => Date) createdAt!: Date;
  @Field(() => String) digest!: string;
  @Field(() => Int, { nullable: true }) release!: number | null;
  @Field(() => Int) rowsIn!: number;
  @Field(() => Int) rowsOut!: number;
}

@ObjectType()
export class TableFileMark {
  @Field(() => String, {
    description: "csv, json, ecsv, vot, txt, tex, bib, methods.tex, svg or zip.",
  })
  kind!: string;
  @Field(() => String) name!: string;
  @Field(() => String, { description: "Path on this server." }) path!: string;
}

@InputType()
export class DecisionInput {
  @Field(() => String) id!: string;
  @Field(() => String) option!: string;
  @Field(() => Boolean, { description: "True for the proposal as it stands." }) byDefault!: boolean;
  @Field(() => String, { nullable: true }) reason?: string | null;
}

@InputType()
export class RowOutInput {
  @Field(() => String) number!: string;
  @Field(() => String) reason!: string;
}

@InputType()
export class RowFormInput {
  @Field(() => String) number!: string;
  @Field(() => FormNameEnum, { nullable: true }) form?: FormName | null;
  @Field(() => Float, { nullable: true, description: "Width of a smoothed step." })
  smoothing?: number | null;
  @Field(() => TreatmentEnum, { nullable: true }) redshift?: Treatment | null;
  @Field(() => String) reason!: string;
}

@InputType({
  description: "A table's recipe: where its rows come from, which, and what was chosen.",
})
export class TableInput {
  @Field(() => Int, { nullable: true, description: "Null for the latest approved records." })
  release?: number | null;
  @Field(() => ConstraintFilterInput) filter!: ConstraintFilterInput;
  @Field(() => [DecisionInput], { nullable: true }) decisions?: DecisionInput[] | null;
  @Field(() => [RowOutInput], { nullable: true }) out?: RowOutInput[] | null;
  @Field(() => [RowFormInput], { nullable: true }) forms?: RowFormInput[] | null;
}

@InputType()
export class SaveRecipeInput {
  @Field(() => ID, {
    nullable: true,
    description: "A table of one's own, for a new version of it.",
  })
  slug?: string | null;
  @Field(() => ID, { nullable: true, description: "The table that this one is a copy of." })
  adaptedFrom?: string | null;
  @Field(() => String) name!: string;
  @Field(() => VisibilityEnum) visibility!: Visibility;
  @Field(() => Boolean, { nullable: true }) notify?: boolean | null;
  @Field(() => TableInput) recipe!: TableInput;
}

export const TableProposalResult = createUnionType({
  name: "TableProposalResult",
  types: () => [TableProposal, Refusal] as const,
});

@ObjectType({ description: "The recipe of a table, to be adapted; the shape of TableInput." })
export class TableRecipeType {
  @Field(() => Int, { nullable: true }) release!: number | null;
  @Field(() => String, { description: "The filter as an address carries it: ?q=…" })
  filter!: string;
  @Field(() => [RecipeDecision]) decisions!: RecipeDecision[];
  @Field(() => [RecipeOut]) out!: RecipeOut[];
  @Field(() => [RecipeForm]) forms!: RecipeForm[];
}

@ObjectType()
export class RecipeDecision {
  @Field(() => String) id!: string;
  @Field(() => String) option!: string;
  @Field(() => Boolean) byDefault!: boolean;
  @Field(() => String, { nullable: true }) reason!: string | null;
}

@ObjectType()
export class RecipeOut {
  @Field(() => String) number!: string;
  @Field(() => String) reason!: string;
}

@ObjectType()
export class RecipeForm {
  @Field(() => String) number!: string;
  @Field(() => FormNameEnum, { nullable: true }) form!: FormName | null;
  @Field(() => Float, { nullable: true }) smoothing!: number | null;
  @Field(() => TreatmentEnum, { nullable: true }) redshift!: Treatment | null;
  @Field(() => String) reason!: string;
}

@ObjectType()
export class TableRowChange {
  @Field(() => String) number!: string;
  @Field(() => String) words!: string;
}

@ObjectType({
  description: "What the newest release, or the records of now, would make of a table.",
})
export class TableChanges {
  @Field(() => Int, {
    nullable: true,
    description: "Release compared with; null for the latest records.",
  })
  release!: number | null;
  @Field(() => [TableRowChange]) rows!: TableRowChange[];
  @Field(() => Int, { description: "Decisions that would be open." }) open!: number;
  @Field(() => Float, { nullable: true, description: "Midpoint of the best tanh history, now." })
  midpoint!: number | null;
  @Field(() => Float, { nullable: true }) midpointThen!: number | null;
  @Field(() => Float, { nullable: true, description: "Its total optical depth, now." })
  opticalDepth!: number | null;
  @Field(() => Float, { nullable: true }) opticalDepthThen!: number | null;
}
