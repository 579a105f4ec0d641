import {
  getNamedType,
  isEnumType,
  isInputObjectType,
  isListType,
  isNonNullType,
  isObjectType,
  isScalarType,
  isUnionType,
  type GraphQLField,
  type GraphQLInputType,
  type GraphQLNamedType,
  type GraphQLOutputType,
  type GraphQLSchema,
} from "graphql";

import { createSchema } from "~server/schema";

import type { Agent, TestServer } from "../support/harness";

/** What a curious person could put into an argument: everything they may know without the numbers. */
export interface Known {
  /** Ids and slugs of every kind. */
  ids: readonly string[];
  /** Record numbers, quotable ones too, and numbers of correlated sets. */
  numbers: readonly string[];
  /** Texts worth searching for; each is a guess of a number. */
  guesses: readonly string[];
  /** Whole contents worth checking: a guess of the submission among them. */
  contents: readonly object[];
}

const DEPTH = 6;

/** Selects all there is below a type, unions included. Fields that need arguments don't occur there. */
function selection(type: GraphQLOutputType, depth = DEPTH): string {
  const named: GraphQLNamedType = getNamedType(type);
  if (isScalarType(named) || isEnumType(named)) return "";
  if (isUnionType(named)) {
    const parts = named.getTypes().map((one) => `... on ${one.name} ${selection(one, depth)}`);
    return `{ __typename ${parts.join(" ")} }`;
  }
  if (!isObjectType(named) || depth === 0) return "{ __typename }";
  const fields = Object.values(named.getFields()).map((field) => {
    if (field.args.some((argument) => isNonNullType(argument.type))) {
      throw new Error(`${named.name}.${field.name} needs arguments: teach the walk about it`);
    }
    return `${field.name} ${selection(field.type, depth - 1)}`;
  });
  return `{ __typename ${fields.join(" ")} }`;
}

/** Values to try for one argument of a query. */
function valuesFor(type: GraphQLInputType, name: string, known: Known): unknown[] {
  if (isNonNullType(type)) return valuesFor(type.ofType, name, known).filter((one) => one !== null);
  if (isListType(type)) return [null, valuesFor(type.ofType, name, known)];
  if (isEnumType(type)) return [null, ...type.getValues().map((one) => one.name)];
  if (isInputObjectType(type)) {
    if (type.name === "ConstraintFieldsInput") return [{}, ...known.contents];
    // One field at a time; the walk is after what each of them lets through.
    const fields = Object.values(type.getFields());
    const least = Object.fromEntries(
      fields
        .filter((field) => isNonNullType(field.type))
        .map((field) => [field.name, valuesFor(field.type, field.name, known)[0]]),
    );
    return [
      least,
      ...fields.flatMap((field) =>
        valuesFor(field.type, field.name, known)
          .filter((one) => one !== null)
          .map((one) => ({ ...least, [field.name]: one })),
      ),
    ];
  }
  switch (getNamedType(type).name) {
    case "ID":
      return [null, ...known.ids];
    case "String":
      return name === "number" || name === "member"
        ? [...known.numbers]
        : [null, "", ...known.guesses];
    case "Int":
    case "Float":
      return [null, 0, 7];
    case "Boolean":
      return [null, true, false];
    default:
      throw new Error(`no values for ${String(type)}: teach the walk about it`);
  }
}

/** Each argument through all its values, the others at their first. */
function combinations(field: GraphQLField<unknown, unknown>, known: Known): object[] {
  const byName = field.args.map((one) => [one.name, valuesFor(one.type, one.name, known)] as const);
  const first = Object.fromEntries(byName.map(([name, values]) => [name, values[0] ?? null]));
  return [
    first,
    ...byName.flatMap(([name, values]) =>
      values.slice(1).map((one) => ({ ...first, [name]: one })),
    ),
  ];
}

let schema: GraphQLSchema | null = null;

/**
 * Asks every query of the schema with everything the person may know, and every download, and
 * hands back all that came: the name of the question with the text of the answer.
 */
export async function walkEverything(
  server: TestServer,
  agent: Agent,
  known: Known,
  downloads: readonly string[],
): Promise<{ asked: string; text: string }[]> {
  schema ??= await createSchema();
  const answers: { asked: string; text: string }[] = [];
  for (const field of Object.values(schema.getQueryType()?.getFields() ?? {})) {
    const declared = field.args.map((one) => `$${one.name}: ${String(one.type)}`);
    const passed = field.args.map((one) => `${one.name}: $${one.name}`);
    const query = `query ${declared.length > 0 ? `(${declared.join(", ")})` : ""} {
      ${field.name}${passed.length > 0 ? `(${passed.join(", ")})` : ""} ${selection(field.type)} }`;
    for (const variables of combinations(field, known)) {
      const body = await server.graphql(agent, query, variables);
      const wrong = body.errors?.find(
        ({ extensions }) => !["FORBIDDEN", "UNAUTHENTICATED"].includes(String(extensions.code)),
      );
      if (wrong) {
        throw new Error(`${field.name} ${JSON.stringify(variables)}: ${wrong.message}`);
      }
      answers.push({
        asked: `${field.name} ${JSON.stringify(variables)}`,
        text: JSON.stringify(body),
      });
    }
  }
  for (const address of downloads) {
    const response = await agent.get(address).buffer(true);
    answers.push({
      asked: address,
      text: `${response.status} ${response.text ?? ""}${JSON.stringify(response.headers)}`,
    });
  }
  return answers;
}

/** Which of these numbers stand in a text, as numbers of their own rather than inside a longer one. */
export function numbersIn(text: string, numbers: readonly string[]): string[] {
  return numbers.filter((number) =>
    new RegExp(`(?<![0-9.])${number.replace(/[.\\+*?^$()[\]{}|]/g, "\\$&")}(?![0-9])`).test(text),
  );
}
