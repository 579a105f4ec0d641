import { createHash } from "node:crypto";

import { EventHead, EventRecord } from "~server/event/event.entity";
import { change, undo } from "~server/event/acting";
import { appendEvent, CHAIN_START, digestOf, lastEvent, verifyChain } from "~server/event/eventLog";

import { actingAs } from "../../factories/constraint";
import { startTestServer, type TestServer } from "../support/harness";

describe("the event log", () => {
  let server: TestServer;
  beforeEach(async () => {
    server = await startTestServer();
  });
  afterEach(() => server.stop());

  const append = (subject: string, detail: Record<string, unknown> = {}): Promise<void> =>
    server.dataSource.transaction((manager) =>
      appendEvent(manager, { kind: "test.happened", actorId: null, subject, detail }),
    );

  it("names in each event the digest of the one before, from a start of zeros", async () => {
    await append("one");
    await append("two", { z: 1, a: ["é", null] });
    const events = await server.dataSource.manager.find(EventRecord, {
      order: { sequence: "ASC" },
    });

    expect(events.map((event) => event.sequence)).toEqual([1, 2]);
    expect(events[0]?.previousDigest).toBe(CHAIN_START);
    expect(events[1]?.previousDigest).toBe(events[0]?.digest);
    expect(await lastEvent(server.dataSource.manager)).toMatchObject({
      sequence: 2,
      digest: events[1]?.digest,
    });
    expect(await verifyChain(server.dataSource.manager)).toEqual({ intact: true, events: 2 });
  });

  it("keeps twelve writers at once in one line without a gap", async () => {
    await Promise.all(Array.from({ length: 12 }, (_, index) => append(`racer ${index}`)));
    expect(await verifyChain(server.dataSource.manager)).toEqual({ intact: true, events: 12 });
  });

  it("finds a changed, a removed and a cut-off event", async () => {
    for (const subject of ["one", "two", "three"]) await append(subject);
    const { manager } = server.dataSource;

    await manager.update(EventRecord, { sequence: 2 }, { subject: "another" });
    expect(await verifyChain(manager)).toMatchObject({ intact: false, sequence: 2 });
    await manager.update(EventRecord, { sequence: 2 }, { subject: "two" });
    expect(await verifyChain(manager)).toMatchObject({ intact: true });

    await manager.delete(EventRecord, { sequence: 3 });
    expect(await verifyChain(manager)).toEqual({
      intact: false,
      sequence: 3,
      reason: "the log ends before its head",
    });
    await manager.delete(EventRecord, { sequence: 1 });
    expect(await verifyChain(manager)).toMatchObject({ intact: false, sequence: 1 });
  });

  it("leaves no event when the change is undone, and needs a transaction", async () => {
    const { user } = await server.signedIn();
    const outcome = await change(actingAs(server.dataSource, user), async (here) => {
      await here.event({ kind: "test.happened", subject: "never" });
      return undo("undone");
    });
    expect(outcome).toBe("undone");
    expect(await server.dataSource.manager.count(EventRecord)).toBe(0);
    expect(await server.dataSource.manager.findOneBy(EventHead, { id: 1 })).toBeNull();
    await expect(
      appendEvent(server.dataSource.manager, { kind: "x", actorId: null, subject: "x" }),
    ).rejects.toThrow("outside a transaction");
  });
});

describe("digestOf", () => {
  it("is SHA-256 over the RFC 8785 form: sorted keys, no blanks", () => {
    // RFC 8785, section 3.2.3: members are sorted by their UTF-16 code units.
    const expected = createHash("sha256").update('{"a":[1,"é"],"b":null}').digest("hex");
    expect(digestOf({ b: null, a: [1.0, "é"] })).toBe(expected);
  });

  it("refuses what is not JSON", () => {
    expect(() => digestOf(undefined)).toThrow("only a JSON value");
  });
});
