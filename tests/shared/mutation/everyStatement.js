"use strict";
const { testFilesOf } = require("./testFilesOf");

testFilesOf("statement").forEach((file) => require(file));
