import type { ConstraintFields, FieldName } from "~shared/statement/fields";

/** Changes one field of a record that is being typed. */
export type SetField = <N extends FieldName>(name: N, value: ConstraintFields[N]) => void;
