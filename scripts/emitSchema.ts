/** Writes the API's SDL from the resolvers: node -r @swc-node/register scripts/emitSchema.ts [FILE] */
import { createSchema } from "../server/schema";

createSchema(process.argv[2] ?? "graphql/schema.graphql").catch((error: unknown) => {
  console.error(error);
  process.exitCode = 1;
});
