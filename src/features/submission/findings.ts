import { useQuery } from "@apollo/client/react";
import { useMemo } from "react";

import { CheckFieldsDocument, type FindingPartsFragment } from "~graphql/generated/graphql";
import type { ConstraintFields, FieldName } from "~shared/statement/fields";
import { isOpen } from "~shared/statement/relevant";
import { fieldFindings } from "~shared/statement/rules";

export interface Findings {
  all: FindingPartsFragment[];
  errors: FindingPartsFragment[];
  mustAnswer: FindingPartsFragment[];
  notes: FindingPartsFragment[];
  /** The registry's part: near-duplicates and medians of other records. */
  registry: "waiting" | "failed" | "done";
  retry: () => void;
}

/**
 * Everything to look at before submitting: the rules that need no registry at once and live, those
 * that need it when the last step asks.
 *
 * @param settled - Ask the registry: the last step is open and nothing is being typed.
 */
export function useFindings(
  fields: ConstraintFields,
  citationId: string | null,
  submissionId: string,
  settled: boolean,
): Findings {
  const local = useMemo(
    () => fieldFindings(fields, { citation: citationId !== null }),
    [fields, citationId],
  );
  const { data, previousData, error, loading, refetch } = useQuery(CheckFieldsDocument, {
    variables: { fields, citationId, submissionId },
    skip: !settled,
    fetchPolicy: "network-only",
  });
  return useMemo(() => {
    const found = new Map<string, FindingPartsFragment>();
    for (const finding of local) found.set(finding.code, finding);
    for (const finding of (data ?? previousData)?.checkFields ?? []) {
      if (!found.has(finding.code)) found.set(finding.code, finding);
    }
    const all = [...found.values()];
    return {
      all,
      errors: all.filter(({ grade }) => grade === "error"),
      mustAnswer: all.filter(({ grade }) => grade === "mustAnswer"),
      notes: all.filter(({ grade }) => grade === "note"),
      registry: error ? "failed" : loading || !data ? "waiting" : "done",
      retry: () => void refetch(),
    };
  }, [local, data, previousData, error, loading, refetch]);
}

/**
 * The sentence that stands at a field: an error in what was typed at once; what is missing only
 * after the person has looked at the last step, so that an empty form does not shout.
 */
export function errorAt(
  findings: readonly FindingPartsFragment[],
  name: FieldName,
  fields: ConstraintFields,
  showMissing: boolean,
): string | undefined {
  return findings.find(
    (finding) =>
      finding.grade === "error" &&
      finding.fields.includes(name) &&
      (showMissing || !finding.code.startsWith("missing")) &&
      // A sentence about several fields stands at those that hold something.
      (finding.fields.length === 1 || !isOpen(fields, name)),
  )?.message;
}
