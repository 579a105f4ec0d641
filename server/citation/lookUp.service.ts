import { createUnionType, Field, ObjectType } from "type-graphql";

import { requireViewer, type RequestContext } from "~server/common/context";
import { refuse, Refusal } from "~server/common/outcomes";
import { overLimit } from "~server/security/overLimit";

import { Citation } from "./citation.entity";
import { lookUpBibtex, LookUpError, readIdentifier, type LookUpProblem } from "./lookUp";

@ObjectType()
export class LookedUpCitation {
  @Field(() => String, { description: "For the preview of pasted BibTeX; nothing is kept yet." })
  bibtex!: string;
  @Field(() => Boolean, {
    description: "True when the registry had the paper, and nobody was asked.",
  })
  known!: boolean;
}

export const LookUpResult = createUnionType({
  name: "LookUpResult",
  types: () => [LookedUpCitation, Refusal] as const,
});

/** Each leads on to what always works. */
const SENTENCES: Record<LookUpProblem, string> = {
  notFound: "The look-up service knows no paper by this number. Check it, or paste the BibTeX.",
  timeOut: "The look-up service took too long to answer. Try again later, or paste the BibTeX.",
  unreachable: "The look-up service can't be reached now. Paste the BibTeX instead.",
  unreadable: "What the look-up service answered can't be read. Paste the BibTeX instead.",
  otherPaper: "The look-up service answered with another paper. Paste the BibTeX instead.",
};

/** A paper by DOI or arXiv number, from the registry or else from the configured service. */
export async function lookUpCitation(
  ctx: RequestContext,
  typed: string,
): Promise<LookedUpCitation | Refusal> {
  const identifier = readIdentifier(typed);
  if (identifier === null) {
    return refuse(
      "IDENTIFIER",
      "That is neither a DOI (10.5555/…) nor an arXiv number (3101.01234).",
      "identifier",
    );
  }
  const { kind, value } = identifier;
  const known = await ctx.database.manager.findOneBy(Citation, { [kind]: value });
  if (known) {
    return Object.assign(new LookedUpCitation(), { bibtex: known.entryBibtex, known: true });
  }
  const { lookUpUrl, lookUpTimeoutMs } = ctx.config;
  if (lookUpUrl === null) {
    return refuse(
      "NOT_CONFIGURED",
      "This registry has no look-up service, and no paper by this number yet. Paste the BibTeX.",
    );
  }
  const over = await overLimit(ctx, [["lookUp", requireViewer(ctx).id]]);
  if (over) return over;
  try {
    const today = new Date().toISOString().slice(0, 10);
    const bibtex = await lookUpBibtex(lookUpUrl, identifier, lookUpTimeoutMs, today);
    return Object.assign(new LookedUpCitation(), { bibtex, known: false });
  } catch (error) {
    if (!(error instanceof LookUpError)) throw error;
    return refuse(`LOOK_UP_${error.problem}`, SENTENCES[error.problem]);
  }
}
