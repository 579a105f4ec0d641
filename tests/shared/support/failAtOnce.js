"use strict";
// A mutant is found by the first counterexample: looking for the smallest one takes a hundred times as long.
require("fast-check").configureGlobal({ endOnFailure: true });
