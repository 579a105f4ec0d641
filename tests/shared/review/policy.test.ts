import { ACTIONS, canMove, MAY, may } from "~shared/review/policy";
import { isAuthor } from "~shared/review/recusal";
import { NEXT_STATES, ROLES } from "~shared/review/states";
import type { RevisionState } from "~shared/review/states";

it("every revision state can be reached from draft", () => {
  const reached = new Set<RevisionState>(["draft"]);
  for (const state of reached) NEXT_STATES[state].forEach((next) => reached.add(next));
  expect([...reached].sort()).toEqual(Object.keys(NEXT_STATES).sort());
});

it("nothing leaves an approved revision", () => {
  for (const state of Object.keys(NEXT_STATES) as RevisionState[]) {
    expect(canMove("approved", state)).toBe(false);
  }
  expect(canMove("inReview", "approved")).toBe(true);
});

describe("may", () => {
  it("allows nobody anything without signing in", () => {
    expect(ACTIONS.filter((action) => may(action, null))).toEqual([]);
  });

  it("lets no one decide, read or claim their own submission, whatever their roles", () => {
    const decisions = ACTIONS.filter((action) => MAY[action].own === "never");
    expect(decisions).toEqual(
      expect.arrayContaining([
        "approveSubmission",
        "returnSubmission",
        "storeReading",
        "claimSubmission",
      ]),
    );
    for (const action of decisions) {
      expect(may(action, ROLES, true)).toBe(false);
      expect(may(action, ["editor"], false)).toBe(true);
      // Error reports are the one thing of another person's that maintainers judge as well.
      expect(may(action, ["contributor", "maintainer"], false)).toBe(
        action === "answerErrorReport",
      );
    }
  });

  it("keeps a draft to its contributor", () => {
    expect(may("saveDraft", ["contributor"], true)).toBe(true);
    expect(may("saveDraft", ["contributor", "editor", "maintainer"], false)).toBe(false);
    expect(may("saveDraft", ["editor"], true)).toBe(false);
  });

  it("lets any signed-in person save a table, and only its owner delete it", () => {
    expect(may("saveTable", [])).toBe(true);
    expect(may("deleteTable", [], true)).toBe(true);
    expect(may("deleteTable", ["maintainer"], false)).toBe(false);
  });

  it("lets only a maintainer grant roles", () => {
    expect(ROLES.filter((role) => may("grantRole", [role]))).toEqual(["maintainer"]);
  });
});

describe("isAuthor", () => {
  // All names are invented.
  it.each([
    ["L. Arvensis", "Arvensis, Lena", true],
    ["Lena Arvensis", "Arvensis, L.", true],
    ["Arvensis, L. M.", "L. Arvensis", true],
    ["M. Arvensis", "Arvensis, Lena", false],
    ["L. Arvensen", "Arvensis, L.", false],
    ["P. Mullerova", 'M{\\"u}llerova, P.', true],
    ["P. Mullerova", "Müllerova, P.", true],
    ["P. Muellerova", "Müllerova, Petra", true],
    ["A. B. de Groot-Larsen", "de Groot-Larsen, A. B.", true],
    ["Anna Groot-Larsen", "de Groot-Larsen, A.", true],
    ["o. fjellheim", "FJELLHEIM, Ø.", true],
    ["Siu-Lan Ng", "Ng, S.-L.", true],
    ["SL Ng", "Ng, S.-L.", true],
    ["Arvensis", "Arvensis, Lena", true],
    ["Mar Vela Quill", "Vela Quill, M.", true],
    ["R. Tamm", "Coral Fields Collaboration", false],
    ["Niamh O’Fenn", "O'Fenn, Niamh", true],
    ["", "Arvensis, L.", false],
  ])("%p among %p: %p", (name, author, expected) => {
    expect(isAuthor(name, ["Vale, T.", author])).toBe(expected);
  });

  it("is false for a paper without authors", () => {
    expect(isAuthor("L. Arvensis", [])).toBe(false);
  });
});
