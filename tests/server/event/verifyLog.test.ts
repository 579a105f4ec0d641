import { createConnection, type Connection, type RowDataPacket } from "mysql2/promise";

import { appendEvent, CHAIN_START, digestOf } from "~server/event/eventLog";
import { verifyLog, type LogReport } from "~server/event/verifyLog";

import { startTestServer, type TestServer } from "../support/harness";

const PERSON = "0c8f1d2e-7a35-4b61-9e0d-2f6b8a1c3d57";
const ENTRIES = [
  { kind: "revision.drafted", actorId: PERSON, subject: "FL-0001.1", detail: {} },
  {
    kind: "revision.submitted",
    actorId: PERSON,
    subject: "FL-0001.1",
    detail: { licence: "x", n: [1, null] },
  },
  {
    kind: "table.saved",
    actorId: null,
    subject: "table:abc",
    detail: { name: "Ångström “½” \u001b", open: true },
  },
  {
    kind: "revision.approved",
    actorId: PERSON,
    subject: "FL-0001.1",
    detail: { note: 'a\\b "c"' },
  },
  { kind: "release.cut", actorId: PERSON, subject: "release:1", detail: { records: 12 } },
];

interface Row extends RowDataPacket {
  sequence: number;
  at: string;
  kind: string;
  actorId: string | null;
  subject: string;
  detail: string;
  previousDigest: string;
  digest: string;
}

let server: TestServer;
/** A hand that reaches past the application, and past the check that JSON is JSON. */
let hand: Connection;

beforeAll(async () => {
  server = await startTestServer();
  hand = await createConnection({
    uri: server.config.databaseUrl,
    dateStrings: true,
    charset: "utf8mb4",
  });
  await hand.query("SET SESSION check_constraint_checks = 0");
});
afterAll(async () => {
  await hand?.end();
  await server?.stop();
});
beforeEach(async () => {
  for (const table of ["registry_release", "event", "event_head"]) {
    await hand.query(`DELETE FROM ${table}`);
  }
  for (const entry of ENTRIES) {
    await server.dataSource.transaction((manager) =>
      appendEvent(manager, { ...entry, at: new Date("2031-02-03T23:59:58.120Z") }),
    );
  }
});

const verify = (...heads: { sequence: number; digest: string }[]): Promise<LogReport> =>
  verifyLog(
    server.dataSource.manager,
    heads.map((head) => ({ source: "the backup of yesterday", ...head })),
  );

async function rows(): Promise<Row[]> {
  const [found] = await hand.query<Row[]>(
    "SELECT sequence, CAST(at AS CHAR) AS at, kind, actorId, subject, CAST(detail AS CHAR) AS detail, previousDigest, digest FROM event ORDER BY sequence",
  );
  return found;
}

const headOf = async (sequence: number) => {
  const row = (await rows())[sequence - 1];
  if (!row) throw new Error(`no event ${sequence}`);
  return { sequence, digest: row.digest };
};

/** Writes a chain anew from an event on, as somebody would who knows how it is made. */
async function remakeFrom(first: number): Promise<void> {
  let previous = CHAIN_START;
  for (const row of await rows()) {
    if (row.sequence >= first) {
      const { sequence, kind, actorId, subject } = row;
      const digest = digestOf({
        ...{ sequence, kind, actorId, subject, previousDigest: previous },
        at: `${row.at.replace(" ", "T").slice(0, -3)}Z`,
        detail: JSON.parse(row.detail),
      });
      await hand.query("UPDATE event SET previousDigest = ?, digest = ? WHERE sequence = ?", [
        previous,
        digest,
        sequence,
      ]);
      previous = digest;
    } else {
      previous = row.digest;
    }
  }
  await hand.query("UPDATE event_head SET digest = ?", [previous]);
}

/** The text with its character at a place changed: in its lowest bit, and, of a letter, in its case. */
function alterations(text: string, place: number): string[] {
  const code = text.charCodeAt(place);
  const swapped =
    text[place] === text[place]?.toUpperCase()
      ? text[place]?.toLowerCase()
      : text[place]?.toUpperCase();
  return [String.fromCharCode(code ^ 1), swapped ?? ""]
    .filter((one) => one !== text[place] && one.length === 1)
    .map((one) => text.slice(0, place) + one + text.slice(place + 1));
}

it("holds when nothing was touched, also against the heads that were kept on the way", async () => {
  const { holds, lines } = await verify(await headOf(2), await headOf(5));
  expect([holds, lines]).toEqual([
    true,
    [
      "The event log holds: 5 events, each naming the one before it.",
      "2 of 2 heads kept elsewhere agree: the backup of yesterday (event 2), the backup of yesterday (event 5).",
    ],
  ]);
});

it.each(["kind", "actorId", "subject", "detail", "previousDigest", "digest", "at"] as const)(
  "one altered byte in column %s is found at every place of every event, with the event's number",
  async (column) => {
    const missed: string[] = [];
    let tried = 0;
    for (const row of await rows()) {
      const text = row[column];
      const values =
        text === null
          ? [PERSON, ""]
          : [...text]
              .flatMap((_, place) => alterations(text, place))
              .concat(column === "at" ? [] : ["", `${text} `]);
      for (const value of values) {
        // What the column itself refuses (a 61st second, a 65th character) can't be written there.
        const [result] = await hand
          .query<never>(`UPDATE event SET \`${column}\` = ? WHERE sequence = ?`, [
            value,
            row.sequence,
          ])
          .catch(() => [null]);
        if (result === null || ((await rows())[row.sequence - 1]?.[column] ?? null) === text)
          continue;
        tried += 1;
        const { holds, lines } = await verify();
        if (holds || !lines[1]?.startsWith(`Event ${row.sequence}:`))
          missed.push(`${row.sequence} ${value}`);
        await hand.query(`UPDATE event SET \`${column}\` = ? WHERE sequence = ?`, [
          text,
          row.sequence,
        ]);
      }
    }
    expect(missed).toEqual([]);
    expect(tried).toBeGreaterThan(20);
    expect((await verify()).holds).toBe(true);
  },
  60_000,
);

it("an altered number, a lost event and a doubled one are found", async () => {
  await hand.query("UPDATE event SET sequence = 7 WHERE sequence = 3");
  expect((await verify()).lines[1]).toBe("Event 3: the event is missing.");
  await hand.query("UPDATE event SET sequence = 3 WHERE sequence = 7");
  await hand.query("UPDATE event SET sequence = 8 WHERE sequence = 5");
  expect((await verify()).lines[1]).toBe("Event 5: the event is missing.");
  await hand.query("UPDATE event SET sequence = 5 WHERE sequence = 8");
  await hand.query(
    "INSERT INTO event SELECT 6, at, kind, actorId, subject, detail, previousDigest, digest FROM event WHERE sequence = 5",
  );
  expect((await verify()).lines[1]).toBe("Event 6: the event does not name the one before it.");
});

it("a changed head is found", async () => {
  await hand.query("UPDATE event_head SET digest = REVERSE(digest)");
  expect((await verify()).lines[1]).toBe("Event 5: the log's head is not this event.");
  await hand.query("UPDATE event_head SET sequence = 4");
  expect((await verify()).lines[1]).toBe("Event 5: the event stands after the log's head.");
});

describe("a deleted last event", () => {
  it("is found by the head of the log", async () => {
    await hand.query("DELETE FROM event WHERE sequence = 5");
    const { holds, lines } = await verify();
    expect([holds, lines[1]]).toEqual([false, "Event 5: the log ends before its head."]);
  });

  it("is found by a head kept elsewhere when the log's own head was set back", async () => {
    const kept = await headOf(5);
    const before = await headOf(4);
    await hand.query("DELETE FROM event WHERE sequence = 5");
    await hand.query("UPDATE event_head SET sequence = 4, digest = ?", [before.digest]);
    expect((await verify()).holds).toBe(true);
    const { holds, lines } = await verify(kept);
    expect([holds, lines[1]]).toEqual([
      false,
      "Event 5: the event is gone; the backup of yesterday keeps event 5 as the last, and the log ends at event 4.",
    ]);
  });

  it("is found when the whole log was emptied", async () => {
    const kept = await headOf(5);
    await hand.query("DELETE FROM event");
    await hand.query("DELETE FROM event_head");
    expect((await verify(kept)).lines[1]).toMatch(/^Event 1: .* up to event 5 at least, are gone/);
  });
});

describe("a chain made anew", () => {
  it("is found by the first head kept elsewhere at or after the change", async () => {
    const kept = [await headOf(1), await headOf(4), await headOf(5)];
    await hand.query("UPDATE event SET subject = 'FL-0002.1' WHERE sequence = 2");
    await remakeFrom(2);
    expect((await verify()).holds).toBe(true);
    const { holds, lines } = await verify(...kept);
    expect(holds).toBe(false);
    expect(lines[1]).toBe(
      "Event 4: it is not the one that the backup of yesterday keeps; one of the events 2 to 4 was changed, and the chain made anew from there.",
    );
    expect(lines.at(-1)).toBe(
      "1 of 3 heads kept elsewhere agree: the backup of yesterday (event 1).",
    );
  });

  it("is found by what fitting tables and releases keep, without being told of them", async () => {
    const { digest } = await headOf(3);
    const { user } = await server.signedIn(["maintainer"]);
    await hand.query(
      `INSERT INTO registry_release (number, cutAt, cutById, notes, digest, records, licence, demonstration, surroundings, lastEventSequence, lastEventDigest, lastEventAt)
       VALUES (1, NOW(), ?, '', REPEAT('0', 64), 0, 'x', 0, '{}', 3, ?, NOW())`,
      [user.id, digest],
    );
    expect((await verify()).lines).toContain(
      "1 of 1 heads kept elsewhere agree: release 1 (event 3).",
    );
    await hand.query("UPDATE event SET detail = '{}' WHERE sequence = 3");
    await remakeFrom(3);
    expect((await verify()).lines[1]).toMatch(/^Event 3: it is not the one that release 1 keeps/);
  });

  it("after the last head that anybody kept can't be found, and that is said", async () => {
    const kept = await headOf(3);
    await hand.query("UPDATE event SET detail = '{}' WHERE sequence = 4");
    await remakeFrom(4);
    const { holds, lines } = await verify(kept);
    expect(holds).toBe(true);
    expect(lines.at(-1)).toBe("After event 3 only the chain itself vouches for the log.");
  });
});

it("without any head kept elsewhere, it says what can't be told", async () => {
  expect((await verify()).lines.at(-1)).toContain("No head of it is kept outside the chain");
});
