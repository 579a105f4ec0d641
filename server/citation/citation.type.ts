import { createUnionType, Field, ID, Int, ObjectType } from "type-graphql";

import { Refusal } from "~server/common/outcomes";

import type { ParsedEntry } from "./bibtex";
import type { Citation } from "./citation.entity";
import { compilableBibtex } from "./export";
import { authorList } from "./names";

@ObjectType("Citation")
export class CitationType {
  @Field(() => ID) id!: string;
  @Field(() => String, { description: "Citation key of the registry, unique." }) key!: string;
  @Field(() => String) entryType!: string;
  @Field(() => [String]) authors!: string[];
  @Field(() => String) title!: string;
  @Field(() => Int, { nullable: true }) year!: number | null;
  @Field(() => String, {
    nullable: true,
    description: "Journal as it will be cited, school of a thesis, or null.",
  })
  container!: string | null;
  @Field(() => String, { nullable: true }) volume!: string | null;
  @Field(() => String, { nullable: true }) pages!: string | null;
  @Field(() => String, { nullable: true }) doi!: string | null;
  @Field(() => String, { nullable: true }) arxiv!: string | null;
  @Field(() => String, { nullable: true }) bibcode!: string | null;
  @Field(() => String, { description: "Tarrowin et al. 2025" }) shortName!: string;
  @Field(() => String, { description: "BibTeX with the registry's key, compilable by itself." })
  bibtex!: string;
  @Field(() => String, { description: "CSL-JSON, as text." }) csl!: string;
}

@ObjectType()
export class ParsedCitation {
  @Field(() => String) key!: string;
  @Field(() => String) entryType!: string;
  @Field(() => [String]) authors!: string[];
  @Field(() => String) title!: string;
  @Field(() => Int, { nullable: true }) year!: number | null;
  @Field(() => String, { nullable: true }) container!: string | null;
  @Field(() => String, { nullable: true }) volume!: string | null;
  @Field(() => String, { nullable: true }) pages!: string | null;
  @Field(() => String, { nullable: true }) doi!: string | null;
  @Field(() => String, { nullable: true }) arxiv!: string | null;
  @Field(() => String, { nullable: true }) bibcode!: string | null;
  @Field(() => String) shortName!: string;
}

@ObjectType({ description: "One entry of pasted BibTeX, parsed and not yet kept." })
export class CitationPreview {
  @Field(() => Int) index!: number;
  @Field(() => Int) line!: number;
  @Field(() => String) givenKey!: string;
  @Field(() => ParsedCitation, { nullable: true }) citation!: ParsedCitation | null;
  @Field(() => CitationType, {
    nullable: true,
    description: "The paper in the registry that this entry is, if there is one.",
  })
  existing!: CitationType | null;
  @Field(() => String, {
    nullable: true,
    description: "How it was found: doi, arxiv, bibcode, title.",
  })
  matchedBy!: string | null;
  @Field(() => String, { nullable: true, description: "Why the entry can't be read, in words." })
  problem!: string | null;
  @Field(() => [String], { description: "Things to look at, none of which refuses the entry." })
  remarks!: string[];
}

@ObjectType()
export class KeptCitation {
  @Field(() => Int) index!: number;
  @Field(() => CitationType) citation!: CitationType;
  @Field(() => Boolean) created!: boolean;
}

@ObjectType()
export class KeptCitations {
  @Field(() => [KeptCitation]) kept!: KeptCitation[];
  @Field(() => [CitationPreview]) problems!: CitationPreview[];
}

export const KeepCitationsResult = createUnionType({
  name: "KeepCitationsResult",
  types: () => [KeptCitations, Refusal] as const,
});

/** A stored citation as the API shows it. */
export function citationType(citation: Citation): CitationType {
  return Object.assign(new CitationType(), {
    id: citation.id,
    key: citation.key,
    entryType: citation.entryType,
    authors: citation.authors,
    title: citation.title,
    year: citation.year,
    container: citation.container,
    volume: citation.volume,
    pages: citation.pages,
    doi: citation.doi,
    arxiv: citation.arxiv,
    bibcode: citation.bibcode,
    shortName: citation.shortName,
    bibtex: compilableBibtex([citation]),
    csl: citation.csl,
  });
}

export function parsedCitation(entry: ParsedEntry): ParsedCitation {
  return Object.assign(new ParsedCitation(), {
    key: entry.givenKey,
    entryType: entry.entryType,
    authors: authorList(entry.authors, entry.moreAuthors),
    title: entry.title,
    year: entry.year,
    container: entry.container,
    volume: entry.volume,
    pages: entry.pages,
    doi: entry.doi,
    arxiv: entry.arxiv,
    bibcode: entry.bibcode,
    shortName: entry.shortName,
  });
}
