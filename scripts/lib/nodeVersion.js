"use strict";
// Old syntax on purpose: this file must still parse under the Node versions it refuses.

/** A sentence when this Node can't run Fogline, else null. */
function nodeComplaint(version) {
  var parts = version.split(".").map(Number);
  if (parts[0] === 20 && parts[1] >= 19) return null;
  return (
    "Fogline runs on Node 20 (20.19 or newer of the 20 line); this is Node " +
    version +
    ". Install Node 20 and run the command again."
  );
}

function requireNode20() {
  var complaint = nodeComplaint(process.versions.node);
  if (complaint === null) return;
  process.stderr.write(complaint + "\n");
  process.exit(1);
}

module.exports = { nodeComplaint: nodeComplaint, requireNode20: requireNode20 };
