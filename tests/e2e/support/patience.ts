// A browser on a busy machine: generous, because a test here never measures time.
jest.setTimeout(180_000);
