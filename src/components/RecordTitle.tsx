import type { ConstraintFields } from "~shared/statement/fields";
import { recordTitle } from "~shared/statement/notation";
import { SymbolText } from "./Text";

/** "Quasar damping wing at z = 7.51", its symbol set as one and never parted from its number. */
export function RecordTitle({ fields }: { fields: ConstraintFields }) {
  const text = recordTitle(fields);
  const [before, after] = text.split(" z = ");
  if (after === undefined) return <>{text}</>;
  return (
    <>
      {before} <SymbolText>z</SymbolText>
      {`\u00A0=\u00A0${after}`}
    </>
  );
}
