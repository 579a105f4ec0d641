import { type ConstraintFields, emptyFields } from "~shared/statement/fields";

/** The record's fields alone, without what GraphQL adds to an object; what is left out is open. */
export function plainFields(fields: Partial<ConstraintFields>): ConstraintFields {
  const plain = emptyFields();
  for (const name of Object.keys(plain) as (keyof ConstraintFields)[]) {
    plain[name] = (fields[name] ?? plain[name]) as never;
  }
  return plain;
}
