import request from "supertest";

import { RateLimitRow } from "~server/security/rateLimit.entity";
import { createRateLimits } from "~server/security/rateLimits";

import { TEST_PASSWORD } from "../../factories/user";
import { accountOperations, tokenIn } from "../account/operations";
import { plantToken, tokenOperations } from "../apiToken/operations";
import { startTestServer, type TestServer } from "../support/harness";

const servers: TestServer[] = [];
afterEach(async () => {
  for (const server of servers.splice(0)) await server.stop();
});

async function limited(limits: Parameters<typeof startTestServer>[0]): Promise<TestServer> {
  const server = await startTestServer(limits);
  servers.push(server);
  return server;
}

/** How many of these answers were not a limit's. */
function allowed(answers: { code?: string }[]): number {
  return answers.filter(({ code }) => code !== "TOO_MANY_REQUESTS").length;
}

it("30 sign-ins at once with a wrong password are answered exactly as often as allowed", async () => {
  const server = await limited({ limits: { signInPerAddress: 4 } });
  const account = accountOperations(server);
  const { user } = await server.signedIn();
  const answers = await Promise.all(
    Array.from({ length: 30 }, () => account.signIn(server.agent(), user.email, "wrong password")),
  );
  expect(allowed(answers)).toBe(4);
  // The right password comes too late, another address is not concerned.
  expect(await account.signIn(server.agent(), user.email, TEST_PASSWORD)).toMatchObject({
    code: "TOO_MANY_REQUESTS",
    message: expect.stringMatching(/^Too many requests\. Try again in \d+ minutes\.$/),
  });
  const other = await server.signedIn();
  expect(other.user.id).not.toBe(user.id);
});

it("an unknown address is limited as a known one is", async () => {
  const server = await limited({ limits: { signInPerAddress: 3 } });
  const account = accountOperations(server);
  const answers = await Promise.all(
    Array.from({ length: 10 }, () =>
      account.signIn(server.agent(), "nobody@fogline.example", "wrong password"),
    ),
  );
  expect(allowed(answers)).toBe(3);
});

it("only failures count: who signs in right is not locked out", async () => {
  const server = await limited({ limits: { signInPerAddress: 2, signInPerCaller: 3 } });
  const account = accountOperations(server);
  const { user } = await server.signedIn();
  for (let i = 0; i < 8; i += 1) {
    expect(await account.signIn(server.agent(), user.email, TEST_PASSWORD)).toMatchObject({
      email: user.email,
    });
  }
});

it("one caller who tries many addresses is limited", async () => {
  const server = await limited({ limits: { signInPerCaller: 5 } });
  const account = accountOperations(server);
  const answers = await Promise.all(
    Array.from({ length: 20 }, (_, i) =>
      account.signIn(server.agent(), `guess${i}@fogline.example`, "wrong password"),
    ),
  );
  expect(allowed(answers)).toBe(5);
});

it("registrations per caller are limited exactly, under parallel load", async () => {
  const server = await limited({ limits: { registerPerCaller: 3 } });
  const account = accountOperations(server);
  const answers = await Promise.all(
    Array.from({ length: 12 }, (_, i) =>
      account.register(server.agent(), { email: `r${i}@fogline.example` }),
    ),
  );
  expect(allowed(answers)).toBe(3);
});

it("mails to one address are limited exactly, whichever operation asks for them", async () => {
  const server = await limited({ limits: { mailPerAddress: 4 } });
  const account = accountOperations(server);
  const email = "bombed@fogline.example";
  const answers = await Promise.all(
    Array.from({ length: 12 }, (_, i) => {
      const agent = server.agent();
      if (i % 3 === 0) return account.register(agent, { email });
      return i % 3 === 1 ? account.resend(agent, email) : account.requestReset(agent, email);
    }),
  );
  expect(allowed(answers)).toBe(4);
  expect((await server.mailsTo(email)).length).toBeLessThanOrEqual(4);
});

it("resets asked for by one caller are limited, for known and unknown addresses alike", async () => {
  const server = await limited({ limits: { mailPerCaller: 3 } });
  const account = accountOperations(server);
  const { user } = await server.signedIn();
  const answers = await Promise.all(
    Array.from({ length: 10 }, (_, i) =>
      account.requestReset(server.agent(), i % 2 ? user.email : `u${i}@fogline.example`),
    ),
  );
  expect(allowed(answers)).toBe(3);
});

it("a borrowed session is no way to try passwords", async () => {
  const server = await limited({ limits: { signInPerAddress: 3 } });
  const account = accountOperations(server);
  const { agent } = await server.signedIn();
  const answers = await Promise.all(
    Array.from({ length: 10 }, () => account.changePassword(agent, "a guess", "lifting at last 9")),
  );
  expect(allowed(answers)).toBe(3);
});

it("a reset lets the owner in again at once", async () => {
  const server = await limited({ limits: { signInPerAddress: 2 } });
  const account = accountOperations(server);
  const { user } = await server.signedIn();
  for (let i = 0; i < 4; i += 1) await account.signIn(server.agent(), user.email, "wrong password");
  await account.requestReset(server.agent(), user.email);
  await account.reset(server.agent(), await tokenIn(server, user.email), "lifting at last 9");
  expect(await account.signIn(server.agent(), user.email, "lifting at last 9")).toMatchObject({
    email: user.email,
  });
});

it("two processes share one count", async () => {
  const server = await limited({ limits: { uploadsPerMinute: 5 } });
  const processes = [createRateLimits(server.config), createRateLimits(server.config)];
  try {
    const waits = await Promise.all(
      Array.from({ length: 40 }, (_, i) => processes[i % 2]!.upload.take("one caller")),
    );
    expect(waits.filter((wait) => wait === 0)).toHaveLength(5);
  } finally {
    for (const each of processes) await each.close();
  }
});

it("the table of counts names no address and no caller", async () => {
  const server = await limited({});
  const account = accountOperations(server);
  await account.signIn(server.agent(), "private@fogline.example", "wrong password");
  const keys = (await server.dataSource.manager.find(RateLimitRow)).map(({ key }) => key);
  expect(keys.length).toBeGreaterThan(0);
  expect(keys.join()).not.toMatch(/@|127\.0\.0\.1/);
});

it("GraphQL requests of one caller are limited, with 429 and the time to wait", async () => {
  const server = await limited({ limits: { graphqlPerMinute: 6 } });
  const answers = await Promise.all(
    Array.from({ length: 15 }, () =>
      request(server.app).post("/graphql").send({ query: "{ session { licence } }" }),
    ),
  );
  const refused = answers.filter(({ status }) => status === 429);
  expect(refused).toHaveLength(9);
  expect(refused[0]?.body.errors[0].extensions.code).toBe("TOO_MANY_REQUESTS");
  expect(Number(refused[0]?.headers["retry-after"])).toBeGreaterThan(0);
});

it("uploads and downloads have counts of their own", async () => {
  const server = await limited({ limits: { uploadsPerMinute: 2, downloadsPerMinute: 3 } });
  const status = async (method: "get" | "post"): Promise<number> =>
    (await request(server.app)[method]("/api/no-such-address")).status;
  expect([await status("post"), await status("post"), await status("post")]).toEqual([
    404, 404, 429,
  ]);
  expect([
    await status("get"),
    await status("get"),
    await status("get"),
    await status("get"),
  ]).toEqual([404, 404, 404, 429]);
});

it("each answer says where the caller stands, in the fields of the IETF draft; a refused one too", async () => {
  const server = await limited({ limits: { graphqlPerMinute: 2, downloadsPerMinute: 1 } });
  const ask = () => request(server.app).post("/graphql").send({ query: "{ session { licence } }" });
  const [first, second, third] = [await ask(), await ask(), await ask()];
  // draft-ietf-httpapi-ratelimit-headers-08 and later: quota q, window w, remaining r, seconds t.
  expect(first.headers["ratelimit-policy"]).toBe('"graphql";q=2;w=60');
  expect(first.headers.ratelimit).toMatch(/^"graphql";r=1;t=(?:60|5\d)$/);
  expect(second.headers.ratelimit).toMatch(/^"graphql";r=0;t=\d+$/);
  expect(third.status).toBe(429);
  expect(third.headers.ratelimit).toMatch(/^"graphql";r=0;t=\d+$/);
  expect(third.body.errors[0].message).toMatch(/^Too many requests\. Try again in \d+ seconds\.$/);
  await request(server.app).get("/api/constraints.csv");
  const over = await request(server.app).get("/api/constraints.csv");
  expect(over.status).toBe(429);
  expect(over.headers["ratelimit-policy"]).toBe('"downloads";q=1;w=60');
  expect(over.body).toMatchObject({ code: "TOO_MANY_REQUESTS" });
  expect(Number(over.headers["retry-after"])).toBeGreaterThan(0);
});

it("a token's person has a count of their own, beside that of the address they share", async () => {
  const server = await limited({ limits: { graphqlPerMinute: 3 } });
  const { graphql } = tokenOperations(server);
  const query = "{ session { licence } }";
  const [one, two] = [await server.signedIn(), await server.signedIn()].map(({ user }) => user);
  const secrets = [
    await plantToken(server, one!.id),
    await plantToken(server, one!.id),
    await plantToken(server, two!.id),
  ];
  const statuses = async (authorization: string, times: number) => {
    const found = [];
    for (let i = 0; i < times; i += 1) found.push((await graphql(authorization, query)).status);
    return found;
  };
  // Two sign-ins have used up two of the address's three.
  expect(await statuses("Basic bm9ib2R5Og==", 2)).toEqual([200, 429]);
  // Two tokens of one person share that person's count.
  expect(await statuses(`Bearer ${secrets[0]}`, 2)).toEqual([200, 200]);
  expect(await statuses(`Bearer ${secrets[1]}`, 2)).toEqual([200, 429]);
  expect(await statuses(`Bearer ${secrets[2]}`, 1)).toEqual([200]);
});

it("a caller can't get a count of its own by naming another address", async () => {
  const server = await limited({ limits: { graphqlPerMinute: 2 } });
  const send = async (i: number): Promise<number> =>
    (
      await request(server.app)
        .post("/graphql")
        .set("X-Forwarded-For", `10.0.0.${i}`)
        .send({ query: "{ session { licence } }" })
    ).status;
  expect([await send(1), await send(2), await send(3)]).toEqual([200, 200, 429]);
});
