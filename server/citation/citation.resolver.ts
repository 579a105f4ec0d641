import { Arg, Ctx, ID, Int, Mutation, Query, Resolver } from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { Requires } from "~server/common/requires";
import { acting } from "~server/event/acting";

import { Citation } from "./citation.entity";
import * as citations from "./citation.service";
import { CitationPreview, CitationType, KeepCitationsResult, citationType } from "./citation.type";
import { lookUpCitation, LookUpResult } from "./lookUp.service";

@Resolver()
export class CitationResolver {
  @Requires("keepCitations")
  @Query(() => [CitationPreview])
  previewCitations(
    @Ctx() ctx: RequestContext,
    @Arg("bibtex", () => String) bibtex: string,
  ): Promise<CitationPreview[]> {
    return citations.previewCitations(ctx.database.manager, bibtex);
  }

  @Requires("keepCitations")
  @Query(() => CitationType, { nullable: true })
  async myCitation(
    @Ctx() ctx: RequestContext,
    @Arg("id", () => ID) id: string,
  ): Promise<CitationType | null> {
    const citation = await ctx.database.manager.findOneBy(Citation, { id });
    return citation && citationType(citation);
  }

  @Requires("keepCitations")
  @Mutation(() => LookUpResult, {
    description:
      "A paper by DOI or arXiv number, as BibTeX: from the registry, or from the look-up service.",
  })
  lookUpCitation(
    @Ctx() ctx: RequestContext,
    @Arg("identifier", () => String) identifier: string,
  ): Promise<typeof LookUpResult> {
    return lookUpCitation(ctx, identifier);
  }

  @Requires("keepCitations")
  @Mutation(() => KeepCitationsResult, {
    description: "Keeps the readable entries; a paper that is already there is found and used.",
  })
  keepCitations(
    @Ctx() ctx: RequestContext,
    @Arg("bibtex", () => String) bibtex: string,
    @Arg("indices", () => [Int], { nullable: true }) indices: number[] | null,
  ): Promise<typeof KeepCitationsResult> {
    return citations.keepCitations(acting(ctx), bibtex, indices);
  }
}
