import {
  isEnumType,
  isInputObjectType,
  isInterfaceType,
  isObjectType,
  isSpecifiedScalarType,
  isUnionType,
  type GraphQLNamedType,
  type GraphQLSchema,
} from "graphql";

import { FIELD_TYPES, FIELD_VOCABULARIES } from "./fields";
import { OPERATION_WORDS } from "./operations";
import { PEOPLE_WORDS } from "./people";
import { RECORD_WORDS } from "./records";
import { TABLE_WORDS } from "./tables";
import type { Words } from "./words";

/**
 * Descriptions of what has none in its decorator: vocabularies that are lists in shared, fields that three types share,
 * and whatever would drown a class in words.
 */
const WORDS: Words = merged(
  FIELD_TYPES,
  FIELD_VOCABULARIES,
  RECORD_WORDS,
  TABLE_WORDS,
  PEOPLE_WORDS,
  OPERATION_WORDS,
);

interface Described {
  description?: string | null | undefined;
}

interface Place {
  /** "Citation.doi", "Query.constraint(number)" */
  readonly name: string;
  readonly type: string;
  /** "" for the type itself. */
  readonly member: string;
  readonly element: Described;
}

/** Everything of a schema that can carry a description, in its order. */
function placesOf(schema: GraphQLSchema): Place[] {
  return Object.values(schema.getTypeMap())
    .filter((type) => !type.name.startsWith("__") && !isSpecifiedScalarType(type))
    .flatMap((type) => [
      { name: type.name, type: type.name, member: "", element: type },
      ...membersOf(type).map(({ member, element }) => ({
        name: `${type.name}.${member}`,
        type: type.name,
        member,
        element,
      })),
    ]);
}

function membersOf(type: GraphQLNamedType): Pick<Place, "member" | "element">[] {
  if (isEnumType(type)) {
    return type.getValues().map((value) => ({ member: value.name, element: value }));
  }
  if (isInputObjectType(type)) {
    return Object.values(type.getFields()).map((field) => ({ member: field.name, element: field }));
  }
  if (!isObjectType(type) && !isInterfaceType(type)) return [];
  return Object.values(type.getFields()).flatMap((field) => [
    { member: field.name, element: field as Described },
    ...field.args.map((argument) => ({
      member: `${field.name}(${argument.name})`,
      element: argument as Described,
    })),
  ]);
}

/** Gives words to whatever has none of its own; a union says what it can be. */
export function describeSchema(schema: GraphQLSchema): GraphQLSchema {
  for (const { type, member, element } of placesOf(schema)) {
    if (!element.description) element.description = WORDS[type]?.[member] ?? null;
  }
  for (const type of Object.values(schema.getTypeMap())) {
    if (!isUnionType(type) || type.description) continue;
    const [refusal, others] = [
      type.getTypes().some(({ name }) => name === "Refusal"),
      type.getTypes().flatMap(({ name }) => (name === "Refusal" ? [] : [name])),
    ];
    const outcome = others.join(" or ");
    type.description = refusal
      ? `${outcome}; or a Refusal, which says why not in words and by a code.`
      : `${outcome}.`;
  }
  return schema;
}

/** Names of what has no description. */
export function undescribed(schema: GraphQLSchema): string[] {
  return placesOf(schema).flatMap(({ name, element }) => (element.description ? [] : [name]));
}

/** Words for what the schema doesn't have, or describes itself: of no use to anybody. */
export function uselessWords(bare: GraphQLSchema): string[] {
  const open = new Set(
    placesOf(bare).flatMap(({ name, element }) => (element.description ? [] : [name])),
  );
  return Object.entries(WORDS).flatMap(([type, words]) =>
    Object.keys(words)
      .map((member) => (member === "" ? type : `${type}.${member}`))
      .filter((name) => !open.has(name)),
  );
}

function merged(...parts: readonly Words[]): Words {
  const all: Record<string, Readonly<Record<string, string>>> = {};
  for (const part of parts) {
    for (const [type, words] of Object.entries(part)) {
      if (all[type]) throw new Error(`words for ${type} stand in two places`);
      all[type] = words;
    }
  }
  return all;
}
