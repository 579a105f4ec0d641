import {
  counted,
  hasWords,
  isOverdue,
  partOf,
  type QueueItem,
  searched,
} from "@/features/desk/queueFilter";

import { CITATION } from "./support";

const item = (parts: Partial<QueueItem> = {}): QueueItem =>
  ({
    id: "q1",
    number: "FL-0071",
    ordinal: 1,
    state: "submitted",
    version: 1,
    submittedAt: "2026-11-01T09:00:00Z",
    claimedByMe: false,
    claimedUntil: null,
    barredBecause: null,
    leftToOthers: false,
    notRenewable: null,
    place: "Table 2",
    page: "11",
    versionRead: "published",
    citation: { ...CITATION, authors: ["Müllerová, A."], title: "Neutral gas" },
    ...parts,
  }) as QueueItem;

describe("the queue's parts", () => {
  const mine = item({ claimedByMe: true, claimedUntil: "2026-12-03T09:00:00Z" });
  const others = item({ claimedUntil: "2026-12-03T09:00:00Z" });
  const barred = item({ barredBecause: "You submitted it.", claimedUntil: "2026-12-03T09:00:00Z" });

  it("hold each submission once", () => {
    expect([item(), mine, others, barred].map(partOf)).toEqual([
      "free",
      "mine",
      "others",
      "barred",
    ]);
    expect(counted([item(), mine, others, barred])).toEqual({
      all: 4,
      free: 1,
      mine: 1,
      others: 1,
      barred: 1,
    });
  });

  it("call overdue what nobody reads after more than 14 days, to the minute", () => {
    const at = (iso: string) => isOverdue(item(), new Date(iso));
    expect(at("2026-11-15T09:00:00Z")).toBe(false);
    expect(at("2026-11-15T09:01:00Z")).toBe(true);
    expect(isOverdue(others, new Date("2026-12-24T09:00:00Z"))).toBe(false);
  });
});

describe("the queue's search", () => {
  it.each(["mullerova", "NEUTRAL gas", "FL-0071", "fl-0071.1", "table 2", "page 11", "gas 0071"])(
    "finds by %s",
    (words) => expect(searched([item()], words)).toHaveLength(1),
  );

  it("finds nothing where one of the words is missing, and everything for none", () => {
    expect(searched([item()], "neutral dust")).toHaveLength(0);
    expect(hasWords([], "")).toBe(true);
  });

  it("puts the oldest first", () => {
    const rows = [item({ id: "b", submittedAt: "2026-11-02T09:00:00Z" }), item({ id: "a" })];
    expect(searched(rows, "").map(({ id }) => id)).toEqual(["a", "b"]);
  });
});
