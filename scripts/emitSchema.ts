/** Writes the API's SDL from the resolvers: node -r @swc-node/register scripts/emitSchema.ts [FILE] */
import { writeFileSync } from "node:fs";

import { createSchema, printedSchema } from "../server/schema";

createSchema()
  .then((schema) =>
    writeFileSync(process.argv[2] ?? "graphql/schema.graphql", printedSchema(schema)),
  )
  .catch((error: unknown) => {
    console.error(error);
    process.exitCode = 1;
  });
