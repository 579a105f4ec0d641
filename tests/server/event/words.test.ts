import { readdirSync, readFileSync } from "node:fs";
import path from "node:path";

import { EVENT_KINDS, eventName, eventSentence } from "~shared/event/words";

const SERVER = path.join(__dirname, "../../../server");

const KIND = "([a-z][a-zA-Z]*\\.(?:[a-z][a-zA-Z]*|\\$\\{\\w+\\}))";
/** `kind: "claim.made"`, `kind: \`role.${change}\``, `kind: same ? "a.b" : "a.c"`. */
const AT_ONCE = new RegExp(
  `\\bkind:\\s*(?:[^"\`,;{}()]*\\?\\s*)?["\`]${KIND}["\`](?:\\s*:\\s*["\`]${KIND}["\`])?`,
  "g",
);
/** `const EVENTS: Record<Notice, string> = { … }` */
const IN_A_MAP = /\bEVENTS\b[^=;]*=\s*\{([^}]*)\}/g;

/** Kinds of events that the server's sources name. */
function appendedKinds(): { kind: string; file: string }[] {
  const files = readdirSync(SERVER, { recursive: true, encoding: "utf8" });
  return files
    .filter((file) => file.endsWith(".ts"))
    .flatMap((file) => {
      const source = readFileSync(path.join(SERVER, file), "utf8");
      const maps = [...source.matchAll(IN_A_MAP)].flatMap(([, rows = ""]) => [
        ...rows.matchAll(new RegExp(`"${KIND}"`, "g")),
      ]);
      return [...source.matchAll(AT_ONCE), ...maps].flatMap((match) =>
        match
          .slice(1)
          .filter((kind) => kind !== undefined)
          .map((kind) => ({ kind, file })),
      );
    });
}

/** Whether a kind as written in a source, perhaps with a placeholder, is this kind. */
const covers = (written: string, kind: string): boolean =>
  new RegExp(`^${written.replace(".", "\\.").replace(/\$\{\w+\}/, "\\w+")}$`).test(kind);

const event = { who: "Ottla Firn", subject: "FL-0042.1", person: null, to: null, detail: {} };

it("every kind that the server appends has its sentence in shared/event/words.ts", () => {
  const appended = appendedKinds();
  expect(appended.length).toBeGreaterThan(25);
  const without = appended.filter(({ kind }) => !EVENT_KINDS.some((known) => covers(kind, known)));
  expect(without).toEqual([]);
});

it("every sentence belongs to a kind that the server appends", () => {
  const appended = appendedKinds();
  const stale = EVENT_KINDS.filter((kind) => !appended.some((one) => covers(one.kind, kind)));
  expect(stale).toEqual([]);
});

it.each(EVENT_KINDS)("%s is said in one sentence, whoever did it and whatever it holds", (kind) => {
  for (const who of ["Ottla Firn", null]) {
    for (const detail of [{}, { fields: ["value"], from: 3, members: [null], version: "x" }]) {
      const sentence = eventSentence(kind, { ...event, who, detail });
      expect(sentence).toMatch(/^[A-Z].*\.$/);
      expect(sentence).not.toMatch(/undefined|null|NaN|\[object/);
    }
  }
  expect(eventName(kind)).toMatch(/^[A-Z][a-z' -]+$/);
});

it("names differ, so that a list of kinds can be chosen from", () => {
  expect(new Set(EVENT_KINDS.map(eventName)).size).toBe(EVENT_KINDS.length);
});

it("says who did what to what", () => {
  expect(eventSentence("claim.made", event)).toBe("Ottla Firn claimed FL-0042.1 to read it again.");
  expect(
    eventSentence("revision.returned", {
      ...event,
      detail: { fields: ["value", "zRole", "citation"] },
    }),
  ).toBe("Ottla Firn returned FL-0042.1 with comments (value, role of the redshift and citation).");
  expect(
    eventSentence("role.granted", {
      who: null,
      subject: "user:1",
      person: "Brisa Kelm",
      to: null,
      detail: { role: "editor" },
    }),
  ).toBe("The program gave Brisa Kelm the editor role.");
});

it("a kind that an older program wrote is still told", () => {
  expect(eventSentence("thing.done", event)).toBe("Ottla Firn: thing.done of FL-0042.1.");
  expect(eventName("thing.done")).toBe("thing.done");
});
