"use strict";
// Writes what is generated: the SDL from the server's classes, the client's types from the SDL and its operations.
require("./lib/nodeVersion").requireNode20();
require("./lib/program").program(async () => {
  const { fromRoot } = require("./lib/paths");
  const { run } = require("./lib/processes");
  const { step } = require("./lib/steps");

  const node = (sentence, ...args) => run(process.execPath, args, { sentence });
  await step("graphql/schema.graphql written", () =>
    node(
      "The server's classes make no valid schema.",
      ...["-r", "@swc-node/register", fromRoot("scripts/emitSchema.ts")],
      fromRoot("graphql/schema.graphql"),
    ),
  );
  await step("graphql/generated written", () =>
    node(
      "The client's operations do not fit the schema.",
      fromRoot("node_modules/@graphql-codegen/cli/cjs/bin.js"),
    ),
  );
});
