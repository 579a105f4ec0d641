import { outcomeWords, reportCountWords, REPORT_OUTCOMES } from "~shared/review/errorReport";

it.each([
  [0, 0, null],
  [1, 0, "1 error report, not answered yet"],
  [0, 1, "1 error report, answered"],
  [3, 0, "3 error reports, not answered yet"],
  [0, 2, "2 error reports, all answered"],
  [1, 2, "3 error reports, 2 answered, 1 not yet"],
])("%p open and %p answered reports read %p", (open, answered, words) => {
  expect(reportCountWords(open, answered)).toBe(words);
});

it("every outcome has words of its own, and a correction names its revision", () => {
  const words = REPORT_OUTCOMES.map((outcome) => outcomeWords(outcome, null));
  expect(new Set(words).size).toBe(REPORT_OUTCOMES.length);
  expect(outcomeWords("corrected", "FL-0042.3")).toBe("Corrected by FL-0042.3");
  expect(outcomeWords("noError", "FL-0042.3")).toBe("Not an error");
});
