import type { AddressInfo } from "node:net";

import { SMTPServer } from "smtp-server";

import { createLogger } from "~server/logging/logger";
import { startMailCatcher } from "~server/mail/catcher";
import { CaughtMailRow } from "~server/mail/caughtMail.entity";
import { queueMail } from "~server/mail/outbox";
import { OutboxMail } from "~server/mail/outboxMail.entity";
import { backoffMs, MAX_TRIES, startOutbox, type OutboxWorker } from "~server/mail/outboxWorker";

import { startTestServer, type TestServer } from "../support/harness";

let server: TestServer;
const ends: (() => Promise<unknown>)[] = [];
beforeAll(async () => {
  server = await startTestServer();
});
beforeEach(async () => {
  await server.dataSource.manager.clear(OutboxMail);
  await server.dataSource.manager.clear(CaughtMailRow);
});
afterEach(async () => {
  for (const end of ends.splice(0).reverse()) await end();
});
afterAll(() => server.stop());

const manager = () => server.dataSource.manager;

/** A worker that only looks when told to. */
function worker(smtpUrl: string): OutboxWorker {
  const outbox = startOutbox({
    dataSource: server.dataSource,
    logger: createLogger("silent"),
    smtpUrl,
    from: "Fogline <fogline@fogline.example>",
    everyMs: 3_600_000,
  });
  ends.push(outbox.close);
  return outbox;
}

async function catcher(): Promise<string> {
  const caught = await startMailCatcher(server.dataSource);
  ends.push(caught.close);
  return caught.url;
}

/** A mail server that answers each recipient with this. */
async function refusing(responseCode: number): Promise<string> {
  const smtp = new SMTPServer({
    authOptional: true,
    disabledCommands: ["STARTTLS", "AUTH"],
    onRcptTo: (_address: unknown, _session: unknown, done: (error: Error) => void) =>
      done(Object.assign(new Error("not now"), { responseCode })),
  } as ConstructorParameters<typeof SMTPServer>[0]);
  await new Promise<void>((resolve) => smtp.listen(0, "127.0.0.1", resolve));
  ends.push(() => new Promise<void>((resolve) => smtp.close(resolve)));
  return `smtp://127.0.0.1:${(smtp.server.address() as AddressInfo).port}`;
}

// The sender chooses the encoding by the content: each text is one that it encodes differently.
it.each([
  ["plain letters", "You have a mail", "Short, and plain.\n\nFogline\n"],
  [
    "long lines",
    `Long ${"subject ".repeat(20)}end`,
    `${"words that have to be folded ".repeat(30)}end\n.\n..\nhttps://fogline.test/?token=${"aB3_-=".repeat(30)}\n`,
  ],
  [
    "a few accents",
    "Rückgabe von FL-0042.1",
    `Dear Łucja Østerfelt, ${"in plain words, ".repeat(20)}= end\n`,
  ],
  [
    "many accents",
    "−0.17 ≤ x ≤ +0.19 für Lyα",
    `${"Дымка рассеивается, ясно. ".repeat(12)}\n\n雾散了\n`,
  ],
])("a mail arrives as it was written: %s", async (_kind, subject, text) => {
  await queueMail(manager(), { to: "w@fogline.example", subject, text });
  await worker(await catcher()).deliver();
  const [caught] = await manager().find(CaughtMailRow);
  expect(caught).toMatchObject({ to: "w@fogline.example", subject });
  expect(caught?.text.trimEnd()).toBe(text.trimEnd());
});

it("a mail is only sent when the transaction that queued it has come to be", async () => {
  const outbox = worker(await catcher());
  await expect(
    manager().transaction(async (inside) => {
      await queueMail(inside, { to: "a@fogline.example", subject: "never", text: "never" });
      await outbox.deliver();
      throw new Error("rolled back");
    }),
  ).rejects.toThrow("rolled back");
  await outbox.deliver();
  expect(await manager().count(CaughtMailRow)).toBe(0);
});

it("several workers send each mail once, and what is sent is not kept", async () => {
  const url = await catcher();
  for (let i = 0; i < 50; i += 1) {
    await queueMail(manager(), { to: `p${i}@fogline.example`, subject: `mail ${i}`, text: "t" });
  }
  await Promise.all([worker(url), worker(url), worker(url)].map((each) => each.deliver()));
  const caught = await manager().find(CaughtMailRow);
  expect(caught.map(({ to }) => to).sort()).toEqual(
    Array.from({ length: 50 }, (_, i) => `p${i}@fogline.example`).sort(),
  );
  const left = await manager().find(OutboxMail);
  expect(left.every((mail) => mail.deliveredAt !== null && mail.text === "")).toBe(true);
});

it("a mail that can't be delivered now waits, longer each time, and is delivered later", async () => {
  await queueMail(manager(), { to: "late@fogline.example", subject: "late", text: "still here" });
  const before = Date.now();
  await worker("smtp://127.0.0.1:1").deliver();
  const [mail] = await manager().find(OutboxMail);
  expect(mail).toMatchObject({ tries: 1, deliveredAt: null, failedAt: null, text: "still here" });
  expect(mail!.nextTryAt.getTime()).toBeGreaterThanOrEqual(before + backoffMs(1) - 1);

  const outbox = worker(await catcher());
  await outbox.deliver();
  expect(await manager().count(CaughtMailRow)).toBe(0);
  await manager().update(OutboxMail, { id: mail!.id }, { nextTryAt: new Date() });
  await outbox.deliver();
  expect(await manager().count(CaughtMailRow)).toBe(1);
});

it("waits double from a quarter of a minute up to six hours", () => {
  expect([1, 2, 3].map(backoffMs)).toEqual([15_000, 30_000, 60_000]);
  expect(backoffMs(MAX_TRIES)).toBe(6 * 3_600_000);
});

it("a recipient refused for good is given up at once, one refused for now is tried again", async () => {
  await queueMail(manager(), { to: "gone@fogline.example", subject: "s", text: "t" });
  await worker(await refusing(550)).deliver();
  const [gone] = await manager().find(OutboxMail);
  expect(gone?.failedAt).not.toBeNull();
  expect(gone?.text).toBe("");

  await manager().clear(OutboxMail);
  await queueMail(manager(), { to: "full@fogline.example", subject: "s", text: "t" });
  await worker(await refusing(452)).deliver();
  const [full] = await manager().find(OutboxMail);
  expect(full).toMatchObject({ failedAt: null, tries: 1, text: "t" });
});

it("a mail taken by a process that died is sent by another after its lease", async () => {
  await queueMail(manager(), { to: "dead@fogline.example", subject: "s", text: "t" });
  const lease = new Date(Date.now() + 60_000);
  await manager()
    .createQueryBuilder()
    .update(OutboxMail)
    .set({ tries: 1, nextTryAt: lease })
    .execute();
  const outbox = worker(await catcher());
  await outbox.deliver();
  expect(await manager().count(CaughtMailRow)).toBe(0);
  await manager().createQueryBuilder().update(OutboxMail).set({ nextTryAt: new Date() }).execute();
  await outbox.deliver();
  expect(await manager().count(CaughtMailRow)).toBe(1);
});

it("a line break in a subject starts no header of its own", async () => {
  await queueMail(manager(), {
    to: "safe@fogline.example",
    subject: "A title\r\nBcc: all@fogline.example",
    text: "t",
  });
  await worker(await catcher()).deliver();
  expect(await manager().find(CaughtMailRow)).toMatchObject([
    { to: "safe@fogline.example", subject: "A title Bcc: all@fogline.example" },
  ]);
});
