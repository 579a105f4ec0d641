"use strict";
const { testFilesOf } = require("./testFilesOf");

testFilesOf("likelihood").forEach((file) => require(file));
