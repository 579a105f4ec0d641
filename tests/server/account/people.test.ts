import { RoleGrant } from "~server/account/roleGrant.entity";
import { grant } from "~server/account/grant";
import { User } from "~server/account/user.entity";
import { markDemonstration } from "~server/database/settings";
import { EventRecord } from "~server/event/event.entity";
import { CaughtMailRow } from "~server/mail/caughtMail.entity";
import { ROLES, type Role } from "~shared/review/states";

import { buildUser } from "../../factories/user";
import { startTestServer, type Agent, type TestServer } from "../support/harness";
import { accountOperations } from "./operations";

let server: TestServer;
let account: ReturnType<typeof accountOperations>;
let maintainer: { agent: Agent; user: User };
beforeAll(async () => {
  server = await startTestServer();
  account = accountOperations(server);
  maintainer = await server.signedIn(["maintainer"], { nameOnPapers: "Maintaining Person" });
});
afterAll(() => server.stop());

const eventsAbout = (user: User): Promise<EventRecord[]> =>
  server.dataSource.manager.find(EventRecord, {
    where: { subject: `user:${user.id}` },
    order: { sequence: "ASC" },
  });

describe("who may", () => {
  const operations: [string, (id: string) => string][] = [
    ["people", () => "{ people { id email } }"],
    ["grantRole", (id) => `mutation { grantRole(personId: "${id}", role: editor) { __typename } }`],
    [
      "revokeRole",
      (id) => `mutation { revokeRole(personId: "${id}", role: editor) { __typename } }`,
    ],
    ["caughtMails", () => "{ caughtMails { text } }"],
  ];
  const others: (Role | "nobody" | "no role")[] = ["nobody", "no role", "contributor", "editor"];
  const cases = operations.flatMap(([name, query]) =>
    others.map((who) => [name, who, query] as const),
  );

  it.each(cases)("%s is refused to %s", async (_name, who, query) => {
    const target = await buildUser(server.dataSource.manager);
    const agent =
      who === "nobody"
        ? server.agent()
        : (await server.signedIn(who === "no role" ? [] : [who])).agent;
    const body = await server.graphql(agent, query(target.id));
    expect(body.errors?.[0]?.extensions.code).toBe(
      who === "nobody" ? "UNAUTHENTICATED" : "FORBIDDEN",
    );
    expect(body.data ?? null).toBeNull();
    expect(await server.dataSource.manager.countBy(RoleGrant, { userId: target.id })).toBe(0);
  });
});

it.each(ROLES)(
  "a maintainer grants %s; it holds from the person's next request on",
  async (role) => {
    const { agent, user } = await server.signedIn();
    const { data } = await account.changeRole(maintainer.agent, "grantRole", user.id, role);
    expect(data.result).toMatchObject({ __typename: "Person", id: user.id, roles: [role] });
    expect(await account.viewer(agent)).toMatchObject({ roles: [role] });

    const again = await account.changeRole(maintainer.agent, "grantRole", user.id, role);
    expect(again.data.result.roles).toEqual([role]);

    await account.changeRole(maintainer.agent, "revokeRole", user.id, role);
    expect(await account.viewer(agent)).toMatchObject({ roles: [] });

    const events = await eventsAbout(user);
    expect(events.map(({ kind, actorId, detail }) => [kind, actorId, detail])).toEqual([
      ["role.granted", maintainer.user.id, { role }],
      ["role.revoked", maintainer.user.id, { role }],
    ]);
    expect((await server.mailsTo(user.email)).map(({ subject }) => subject)).toEqual([
      `You are now ${role}`,
      `You are no longer ${role}`,
    ]);
  },
);

it("a role is only given to a person there is, with a confirmed address", async () => {
  const unconfirmed = await buildUser(server.dataSource.manager, [], { confirmedAt: null });
  const first = await account.changeRole(maintainer.agent, "grantRole", unconfirmed.id, "editor");
  expect(first.data.result).toMatchObject({ code: "NOT_CONFIRMED" });
  for (const id of ["3e3b9c5e-0000-4000-8000-000000000000", "no such id", "' OR 1=1"]) {
    const body = await account.changeRole(maintainer.agent, "grantRole", id, "editor");
    expect(body.data?.result).toMatchObject({ code: "NOT_FOUND" });
  }
});

it("people are found by name or address, and a pattern is only text", async () => {
  const find = async (text: string | null): Promise<string[]> => {
    const { data } = await server.graphql(
      maintainer.agent,
      "query ($text: String) { people(text: $text) { email nameOnPapers confirmed registeredAt roles } }",
      { text },
    );
    return data.people.map(({ email }: { email: string }) => email);
  };
  await buildUser(server.dataSource.manager, [], {
    email: "odd_100%@fogline.example",
    nameOnPapers: "Ysolde Brackwater",
  });
  expect(await find("brackwater")).toEqual(["odd_100%@fogline.example"]);
  expect(await find("ODD_100%@")).toEqual(["odd_100%@fogline.example"]);
  expect(await find("%")).toEqual(["odd_100%@fogline.example"]);
  expect(await find("no such person")).toEqual([]);
  expect((await find(null)).length).toBeGreaterThan(1);
});

describe("maintainers among themselves", () => {
  let house: TestServer;
  beforeAll(async () => {
    house = await startTestServer();
  });
  afterAll(() => house.stop());

  const maintainers = (): Promise<number> =>
    house.dataSource.manager.countBy(RoleGrant, { role: "maintainer" });

  it("two who take the role from each other at once leave one maintainer", async () => {
    const operations = accountOperations(house);
    const one = await house.signedIn(["maintainer"]);
    const two = await house.signedIn(["maintainer"]);
    const answers = await Promise.all([
      operations.changeRole(one.agent, "revokeRole", two.user.id, "maintainer"),
      operations.changeRole(two.agent, "revokeRole", one.user.id, "maintainer"),
    ]);
    expect(await maintainers()).toBe(1);
    const codes = answers.map((body) => body.errors?.[0]?.extensions.code ?? "done");
    expect(codes.sort()).toEqual(["FORBIDDEN", "done"]);
  });

  it("the last maintainer can't be taken away, not even by that person", async () => {
    const operations = accountOperations(house);
    const [last] = await house.dataSource.manager.find(RoleGrant, {
      where: { role: "maintainer" },
    });
    await house.dataSource.manager.delete(RoleGrant, { userId: last?.userId });
    const { agent, user } = await house.signedIn(["maintainer"]);
    const body = await operations.changeRole(agent, "revokeRole", user.id, "maintainer");
    expect(body.data.result).toMatchObject({ __typename: "Refusal", code: "LAST_MAINTAINER" });
    expect(await maintainers()).toBe(1);
  });
});

describe("caught mails", () => {
  it("are shown to a maintainer of a demonstration, and to no one of a real registry", async () => {
    await server.dataSource.manager.insert(CaughtMailRow, {
      to: "a@fogline.example",
      subject: "Confirm your address",
      text: "https://fogline.test/account/confirm?token=x",
    });
    const query = "{ caughtMails { id at to subject text } }";
    const real = await server.graphql(maintainer.agent, query);
    expect(real.errors?.[0]?.extensions.code).toBe("FORBIDDEN");

    await markDemonstration(server.dataSource.manager);
    const demonstration = await server.graphql(maintainer.agent, query);
    expect(demonstration.data.caughtMails).toMatchObject([{ subject: "Confirm your address" }]);
    const { data } = await server.graphql(server.agent(), "{ session { demonstration } }");
    expect(data.session.demonstration).toBe(true);
  });
});

describe("grant from the command line", () => {
  const env = (): Record<string, string> => ({ DATABASE_URL: server.config.databaseUrl });

  it("makes the first maintainer by address, and the event names no actor", async () => {
    const user = await buildUser(server.dataSource.manager, [], { confirmedAt: null });
    expect(await grant([user.email.toUpperCase(), "maintainer"], env())).toEqual({
      ok: true,
      sentence: `${user.email} is now maintainer.`,
    });
    expect(await grant([user.email, "maintainer"], env())).toEqual({
      ok: true,
      sentence: `${user.email} is maintainer already.`,
    });
    const found = await server.dataSource.manager.findOneOrFail(User, {
      where: { id: user.id },
      relations: { roles: true },
    });
    expect(found.roles.map(({ role }) => role)).toEqual(["maintainer"]);
    expect(found.confirmedAt).not.toBeNull();
    expect((await eventsAbout(user)).map(({ kind, actorId }) => [kind, actorId])).toEqual([
      ["role.granted", null],
    ]);
  });

  it("says what is wrong with an address or a role", async () => {
    expect(await grant(["nobody@fogline.example", "editor"], env())).toMatchObject({ ok: false });
    expect(await grant(["nobody@fogline.example", "king"], env())).toMatchObject({ ok: false });
    expect(await grant([], env())).toMatchObject({ ok: false });
  });
});
