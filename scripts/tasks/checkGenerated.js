"use strict";
// Compares graphql/generated with what codegen would write now; names the files that differ.
// Needs -r @swc-node/register, as the configuration is TypeScript.
const fs = require("node:fs");

const { generate } = require("@graphql-codegen/cli");

const config = require("../../codegen.ts").default;

generate({ ...config, silent: true, errorsOnly: true }, false)
  .then((files) => {
    const differ = files.filter(
      ({ filename, content }) =>
        !fs.existsSync(filename) || fs.readFileSync(filename, "utf8") !== content,
    );
    for (const { filename } of differ) process.stdout.write(`${filename} is out of date.\n`);
    process.exit(differ.length === 0 ? 0 : 1);
  })
  .catch((error) => {
    process.stderr.write(`${error.message}\n`);
    process.exit(1);
  });
