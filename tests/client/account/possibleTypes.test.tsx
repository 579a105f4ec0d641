import { readFileSync } from "node:fs";
import { join } from "node:path";

import { buildSchema, isUnionType } from "graphql";

import { possibleTypes } from "@/apollo/possibleTypes";

it("the cache knows the members of every union of the API", () => {
  const sdl = readFileSync(join(__dirname, "../../../graphql/schema.graphql"), "utf8");
  const unions = Object.values(buildSchema(sdl).getTypeMap()).filter(isUnionType);
  const members = Object.fromEntries(
    unions.map((union) => [
      union.name,
      union
        .getTypes()
        .map(({ name }) => name)
        .sort(),
    ]),
  );
  const known = Object.fromEntries(
    Object.entries(possibleTypes).map(([name, types]) => [name, [...types].sort()]),
  );
  expect(known).toEqual(members);
});
