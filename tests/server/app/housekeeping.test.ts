import { MailToken } from "~server/account/mailToken.entity";
import { issueToken } from "~server/account/tokens";
import { User } from "~server/account/user.entity";
import { sweep } from "~server/database/housekeeping";
import { queueMail } from "~server/mail/outbox";
import { OutboxMail } from "~server/mail/outboxMail.entity";

import { buildUser } from "../../factories/user";
import { startTestServer, type TestServer } from "../support/harness";

let server: TestServer;
beforeAll(async () => {
  server = await startTestServer();
});
afterAll(() => server.stop());

const DAY_MS = 86_400_000;

it("what has no use any more goes after its time, and nothing else", async () => {
  const { manager } = server.dataSource;
  const waiting = await buildUser(manager, [], { confirmedAt: null });
  const member = await buildUser(manager);
  await issueToken(manager, waiting.id, "confirm");
  await queueMail(manager, { to: "sent@fogline.example", subject: "s", text: "t" });
  await manager.update(OutboxMail, { to: "sent@fogline.example" }, { deliveredAt: new Date() });
  await queueMail(manager, { to: "waits@fogline.example", subject: "s", text: "t" });

  await sweep(manager);
  expect(await manager.countBy(MailToken, { userId: waiting.id })).toBe(1);
  expect(await manager.count(OutboxMail)).toBe(2);
  expect(await manager.count(User)).toBe(2);

  await sweep(manager, new Date(Date.now() + 3 * DAY_MS));
  expect(await manager.count(MailToken)).toBe(0);
  expect(await manager.count(User)).toBe(2);

  await sweep(manager, new Date(Date.now() + 31 * DAY_MS));
  // A mail that was never sent waits for a mail server, however long that takes.
  expect((await manager.find(OutboxMail)).map(({ to }) => to)).toEqual(["waits@fogline.example"]);
  expect((await manager.find(User)).map(({ id }) => id)).toEqual([member.id]);
});
