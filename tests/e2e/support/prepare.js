"use strict";
// Before the end-to-end tests: server and client are built from the sources as they are now.
const { buildClient, buildServer } = require("../../../scripts/lib/build");
const { explain } = require("../../../scripts/lib/failure");

module.exports = async function prepare() {
  if (!process.env.TEST_DATABASE_URL)
    throw new Error("The end-to-end tests need a MariaDB: run npm test -- e2e.");
  try {
    await buildServer();
    await buildClient();
  } catch (error) {
    const { sentence, details } = explain(error);
    throw new Error(`${sentence}\n${details}`);
  }
};
