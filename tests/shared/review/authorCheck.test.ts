import {
  CHECK_ADDRESS_KEPT_DAYS,
  CHECK_DAYS,
  type CHECK_STATES,
  checkWords,
  linkStanding,
} from "~shared/review/authorCheck";
import { CREDITS_AFTERWARDS, FORMER_MEMBER } from "~shared/review/formerMember";

const EXPIRES = new Date("2026-12-31T12:00:00Z");
const standing = (state: (typeof CHECK_STATES)[number], now: string) =>
  linkStanding({ state, expiresAt: EXPIRES }, new Date(now));

it("a link opens until its moment, and not at it", () => {
  expect(standing("sent", "2026-12-31T11:59:59.999Z")).toBe("open");
  expect(standing("sent", "2026-12-31T12:00:00Z")).toBe("expired");
});

it("an answer can be corrected as long as the link works", () => {
  expect(standing("answered", "2026-12-01T00:00:00Z")).toBe("answered");
  expect(standing("answered", "2027-01-01T00:00:00Z")).toBe("closed");
});

it.each(["closed", "revoked"] as const)(
  "a %s check stays so, before and after its date",
  (state) => {
    expect(standing(state, "2026-12-01T00:00:00Z")).toBe(state);
    expect(standing(state, "2027-01-01T00:00:00Z")).toBe(state);
  },
);

it("an author's address outlives the link, but not for long", () => {
  expect(CHECK_ADDRESS_KEPT_DAYS).toBeGreaterThan(CHECK_DAYS);
});

it("the public reads the verdict with its day, and whether comments are dealt with", () => {
  const on = "1 December 2026";
  const correct = "An author of the paper checked this revision on 1 December 2026: correct.";
  expect(checkWords("correct", on, false)).toBe(correct);
  expect(checkWords("correct", on, true)).toBe(correct);
  expect(checkWords("comments", on, true)).toBe(
    "An author of the paper commented on this revision on 1 December 2026; the editors have dealt with it.",
  );
  expect(checkWords("comments", on, false)).toBe(
    "An author of the paper commented on this revision on 1 December 2026; the editors have yet to deal with it.",
  );
});

it("contributions outlive their account, under the name or a word that holds none", () => {
  expect(CREDITS_AFTERWARDS).toEqual(["named", "anonymous"]);
  expect(FORMER_MEMBER).toBe("a former member");
});
