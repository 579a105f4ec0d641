"use strict";
// Runs every test against a MariaDB and in a Chromium of its own, and leaves nothing behind.
require("./lib/nodeVersion").requireNode20();
require("./lib/testFogline").main();
