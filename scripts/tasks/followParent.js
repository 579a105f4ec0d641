"use strict";
// Preloaded into the server: it ends with the program that started it, even if that was killed.
if (process.channel) {
  process.on("disconnect", () => process.kill(process.pid, "SIGTERM"));
  process.channel.unref();
}
