import type { ApolloServerPlugin } from "@apollo/server";
import { ApolloArmor } from "@escape.tech/graphql-armor";
import {
  GraphQLError,
  isListType,
  isNonNullType,
  type DocumentNode,
  type GraphQLOutputType,
  type GraphQLSchema,
} from "graphql";
import {
  fieldExtensionsEstimator,
  getComplexity,
  type ComplexityEstimator,
} from "graphql-query-complexity";

import type { RequestContext } from "~server/common/context";

export const MAX_DEPTH = 10;
export const MAX_ALIASES = 15;
export const MAX_DIRECTIVES = 20;
export const MAX_TOKENS = 2000;
export const MAX_COST = 500_000;
/** Rows a list is taken to have when it does not say. */
const LIST_ROWS = 10;
/** Rows of a page whose size is not given. */
const FULL_PAGE = 500;

/** Depth, aliases and directives, refused while the document is validated. */
export function shapeGuards(): Pick<
  ReturnType<ApolloArmor["protect"]>,
  "validationRules" | "plugins"
> {
  const { validationRules, plugins } = new ApolloArmor({
    // A fragment is a way to write, not a level of what is asked.
    maxDepth: { n: MAX_DEPTH, flattenFragments: true },
    maxAliases: { n: MAX_ALIASES },
    maxDirectives: { n: MAX_DIRECTIVES },
    // Cost is counted below, with the sizes that lists are asked for.
    costLimit: { enabled: false },
    // Armor's own answers 500; parseOptions.maxTokens does the same with 400.
    maxTokens: { enabled: false },
    // A public API helps who writes to it.
    blockFieldSuggestion: { enabled: false },
  }).protect();
  return { validationRules, plugins };
}

function isList(type: GraphQLOutputType): boolean {
  return isListType(isNonNullType(type) ? type.ofType : type);
}

/** One a field; a page costs its rows, any other list a fixed guess. */
const byRows: ComplexityEstimator = ({ args, field, childComplexity }) => {
  if (field.args.some(({ name }) => name === "limit")) {
    const { limit } = args as { limit?: unknown };
    const rows = typeof limit === "number" ? Math.max(0, limit) : FULL_PAGE;
    // The list inside is guessed at LIST_ROWS already.
    return 1 + childComplexity * Math.max(1, Math.ceil(rows / LIST_ROWS));
  }
  return 1 + childComplexity * (isList(field.type) ? LIST_ROWS : 1);
};

function costOf(
  schema: GraphQLSchema,
  query: DocumentNode,
  operationName: string | null,
  variables: Record<string, unknown> | undefined,
): number {
  try {
    return getComplexity({
      schema,
      query,
      ...(operationName ? { operationName } : {}),
      variables: variables ?? {},
      estimators: [fieldExtensionsEstimator(), byRows],
    });
  } catch (error) {
    // Variables are checked here for the first time, and the fault is the caller's.
    if (!(error instanceof GraphQLError)) throw error;
    throw new GraphQLError(error.message, {
      extensions: { code: "BAD_USER_INPUT", http: { status: 400 } },
    });
  }
}

/** Refuses a query that asks for more than a screen or a pipeline ever needs. */
export function costGuard(schema: GraphQLSchema): ApolloServerPlugin<RequestContext> {
  return {
    requestDidStart: async () => ({
      didResolveOperation: async ({ request, document, operationName }) => {
        const cost = costOf(schema, document, operationName, request.variables);
        if (cost > MAX_COST) {
          throw new GraphQLError(
            `This asks for too much at once: cost ${cost}, allowed ${MAX_COST}.`,
            {
              extensions: { code: "QUERY_TOO_COSTLY", http: { status: 400 } },
            },
          );
        }
      },
    }),
  };
}
