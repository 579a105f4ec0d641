"use strict";
// Starts Fogline: everything it needs first, then one process for client and API.
// This file and nodeVersion.js use old syntax only, so that an old Node gets a sentence, not a SyntaxError.
require("./lib/nodeVersion").requireNode20();
require("./lib/startFogline").main();
