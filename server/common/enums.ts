import { registerEnumType } from "type-graphql";

import { CONSTRAINT_SORTS } from "~shared/filter/filter";
import {
  MATRIX_KINDS,
  SET_STATES,
  type MatrixKind,
  type SetState,
} from "~shared/correlatedSet/content";
import {
  DATA_KINDS,
  DATA_RELATIONS,
  type DataKind,
  type DataRelation,
} from "~shared/dependence/namedData";
import { LINK_RELATIONS, type LinkRelation } from "~shared/dependence/relation";
import { EVIDENCE_KINDS, type EvidenceKind } from "~shared/evidence/evidence";
import { METHOD_FAMILIES, type MethodFamily } from "~shared/methods/vocabulary";
import { CHECK_STATES, CHECK_VERDICTS, LINK_STANDINGS } from "~shared/review/authorCheck";
import { REPORT_OUTCOMES, REPORT_STATES } from "~shared/review/errorReport";
import { NOTICE_KINDS, type NoticeKind } from "~shared/review/notice";
import { CREDITS_AFTERWARDS } from "~shared/review/formerMember";
import {
  RECORD_STATES,
  REVISION_STATES,
  ROLES,
  type RecordState,
  type RevisionState,
  type Role,
} from "~shared/review/states";
import {
  TOKEN_SCOPES,
  TOKEN_STATES,
  type TokenScope,
  type TokenState,
} from "~shared/review/tokenScopes";
import * as fields from "~shared/statement/fields";
import { FINDING_GRADES } from "~shared/statement/rules";

/** A GraphQL enum from one of shared's word lists; value and name are the same word. */
function enumOf<T extends string>(name: string, words: readonly T[]): Record<T, T> {
  const map = Object.fromEntries(words.map((word) => [word, word])) as Record<T, T>;
  registerEnumType(map, { name });
  return map;
}

export const QuantityEnum = enumOf<fields.Quantity>("Quantity", fields.QUANTITIES);
export const SpeciesEnum = enumOf<fields.Species>("Species", fields.SPECIES);
export const HeliumEnum = enumOf<fields.Helium>("Helium", fields.HELIUM);
export const ScaleEnum = enumOf<fields.Scale>("Scale", fields.SCALES);
export const WeightingEnum = enumOf<fields.Weighting>("Weighting", fields.WEIGHTINGS);
export const RedshiftRoleEnum = enumOf<fields.RedshiftRole>("RedshiftRole", fields.REDSHIFT_ROLES);
export const StatementKindEnum = enumOf<fields.StatementKind>(
  "StatementKind",
  fields.STATEMENT_KINDS,
);
export const LevelEnum = enumOf<fields.Level>("Level", fields.LEVELS);
export const EstimatorEnum = enumOf<fields.Estimator>("Estimator", fields.ESTIMATORS);
export const CosmicVarianceEnum = enumOf<fields.CosmicVariance>(
  "CosmicVariance",
  fields.COSMIC_VARIANCES,
);
export const VersionReadEnum = enumOf<fields.VersionRead>("VersionRead", fields.VERSIONS_READ);
export const DurationUnitEnum = enumOf<fields.DurationUnit>("DurationUnit", fields.DURATION_UNITS);
export const CurveColumnEnum = enumOf<fields.CurveColumn>("CurveColumn", fields.CURVE_COLUMNS);
export const MethodFamilyEnum = enumOf<MethodFamily>("MethodFamily", METHOD_FAMILIES);
export const RevisionStateEnum = enumOf<RevisionState>("RevisionState", REVISION_STATES);
export const RecordStateEnum = enumOf<RecordState>("RecordState", RECORD_STATES);
export const RoleEnum = enumOf<Role>("Role", ROLES);
export const FindingGradeEnum = enumOf("FindingGrade", FINDING_GRADES);
export const ConstraintSortEnum = enumOf("ConstraintSort", CONSTRAINT_SORTS);
export const CheckStateEnum = enumOf("CheckState", CHECK_STATES);
export const CheckVerdictEnum = enumOf("CheckVerdict", CHECK_VERDICTS);
export const LinkStandingEnum = enumOf("LinkStanding", LINK_STANDINGS);
export const ReportStateEnum = enumOf("ReportState", REPORT_STATES);
export const ReportOutcomeEnum = enumOf("ReportOutcome", REPORT_OUTCOMES);
export const CreditAfterwardsEnum = enumOf("CreditAfterwards", CREDITS_AFTERWARDS);
export const MatrixKindEnum = enumOf<MatrixKind>("MatrixKind", MATRIX_KINDS);
export const SetStateEnum = enumOf<SetState>("SetState", SET_STATES);
export const DataKindEnum = enumOf<DataKind>("DataKind", DATA_KINDS);
export const DataRelationEnum = enumOf<DataRelation>("DataRelation", DATA_RELATIONS);
export const LinkRelationEnum = enumOf<LinkRelation>("LinkRelation", LINK_RELATIONS);
export const NoticeKindEnum = enumOf<NoticeKind>("NoticeKind", NOTICE_KINDS);
export const EvidenceKindEnum = enumOf<EvidenceKind>("EvidenceKind", EVIDENCE_KINDS);
export const TokenScopeEnum = enumOf<TokenScope>("TokenScope", TOKEN_SCOPES);
export const TokenStateEnum = enumOf<TokenState>("TokenState", TOKEN_STATES);
