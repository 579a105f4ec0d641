import type { ConstraintFields } from "~shared/statement/fields";

export function PointPreview(_props: {
  fields: ConstraintFields;
  width?: number;
  height?: number;
}) {
  return null;
}
