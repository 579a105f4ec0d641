import { useQuery } from "@apollo/client/react";
import { useEffect, useState } from "react";

import { useLatest } from "@/apollo/useLatest";
import { TableProposalDocument, type TableInput } from "~graphql/generated/graphql";

const PAUSE_MS = 300;

/** What a recipe makes, asked again a moment after it last changed; meanwhile the last answer stays. */
export function useProposal(recipe: TableInput) {
  const key = JSON.stringify(recipe);
  const [settled, setSettled] = useState(key);
  useEffect(() => {
    const timer = setTimeout(() => setSettled(key), PAUSE_MS);
    return () => clearTimeout(timer);
  }, [key]);
  const { data, error, refetch } = useQuery(TableProposalDocument, {
    variables: { recipe: JSON.parse(settled) as TableInput },
    fetchPolicy: "cache-and-network",
  });
  const answer = useLatest(data)?.tableProposal;
  return {
    proposal: answer?.__typename === "TableProposal" ? answer : null,
    refusal: answer?.__typename === "Refusal" ? answer.message : null,
    error,
    refetch,
  };
}
