import { bytesInWords, EVIDENCE_ACCEPT } from "~shared/evidence/evidence";

it.each([
  [0, "0 bytes"],
  [1, "1 byte"],
  [999, "999 bytes"],
  [1000, "1 kB"],
  [999_499, "999 kB"],
  [999_950, "1 MB"],
  [1_449_999, "1.4 MB"],
  [10_000_000, "10 MB"],
  [199_999_990, "200 MB"],
])("%i bytes read %s", (bytes, words) => {
  expect(bytesInWords(bytes)).toBe(words);
});

it("a file picker offers the endings of every kind", () => {
  expect(EVIDENCE_ACCEPT).toBe(".pdf,.png,.jpg,.jpeg,.csv");
});
