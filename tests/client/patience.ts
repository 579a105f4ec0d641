import { configure } from "@testing-library/react";

// As patient as a machine that runs all files at once is slow: what never comes still fails.
configure({ asyncUtilTimeout: 10_000 });
jest.setTimeout(60_000);
