import type { RequestListener } from "node:http";

import { isProblem, parseBibtex } from "~server/citation/bibtex";
import { Citation } from "~server/citation/citation.entity";
import { readIdentifier } from "~server/citation/lookUp";
import { answerCsl, startLookUpFake, type LookUpFake } from "~server/citation/lookUpFake";

import { startTestServer, type Agent, type TestServer } from "../support/harness";

const PAPER = {
  type: "article-journal",
  title: "A look through the mist",
  author: [{ family: "Marrowin", given: "Elspeth" }],
  issued: { "date-parts": [[2031, 4, 2]] },
};

/** What the fake answers beyond its own papers: everything a service may get wrong. */
let elsewhere = "";
const asked: string[] = [];
const json =
  (body: unknown): RequestListener =>
  (_request, response) =>
    answerCsl(response, body);
const redirect =
  (to: () => string): RequestListener =>
  (_request, response) => {
    response.writeHead(302, { location: to() });
    response.end();
  };
const ANSWERS: Record<string, RequestListener> = {
  "10.5555/hangs": () => undefined,
  "10.5555/half": (_request, response) => {
    response.writeHead(200, { "content-type": "application/json" });
    response.write('{"title": "Half');
  },
  "10.5555/broken": (_request, response) => {
    response.writeHead(500);
    response.end("a stack trace");
  },
  "10.5555/page": (_request, response) => {
    response.writeHead(200, { "content-type": "text/html" });
    response.end("<html><body>Sign in</body></html>");
  },
  "10.5555/text": (_request, response) => {
    response.writeHead(200, { "content-type": "application/json" });
    response.end("no JSON at all");
  },
  "10.5555/large": json({ ...PAPER, abstract: "x".repeat(250_000) }),
  "10.5555/untitled": json({ ...PAPER, title: undefined }),
  "10.5555/list": json([]),
  "10.5555/other": json({ ...PAPER, DOI: "10.5555/quite.another" }),
  "10.5555/leaves": redirect(() => elsewhere),
  "10.5555/stays": redirect(() => "/csl/10.5555%2Fmoved"),
  "10.5555/moved": json(PAPER),
  "10.5555/circle": redirect(() => "/csl/10.5555%2Fcircle"),
  "10.5555/tex": json({
    ...PAPER,
    title: "Fog & 50% \\input{/etc/passwd} $x$ <script>alert(1)</script> {",
    author: [{ family: "Ølund} and {X", given: "Å." }, { name: "The Lantern Team" }],
    URL: "https://elsewhere.example/x",
    custom: { anything: [1, 2] },
  }),
  "10.5555/a(b)c;d?e#f": json(PAPER),
};

let fake: LookUpFake;
let other: LookUpFake;
let server: TestServer;
let contributor: Agent;
beforeAll(async () => {
  const watched = Object.entries(ANSWERS).map(([id, answer]): [string, RequestListener] => [
    id,
    (request, response) => {
      asked.push(request.url ?? "");
      answer(request, response);
    },
  ]);
  fake = await startLookUpFake(Object.fromEntries(watched));
  other = await startLookUpFake();
  elsewhere = other.url.replace("{id}", "10.5555%2Fjdw.2027.0144");
  // Short, so that a service that hangs doesn't hold the test up; nothing here measures time.
  server = await startTestServer({ config: { lookUpUrl: fake.url, lookUpTimeoutMs: 1500 } });
  contributor = (await server.signedIn(["contributor"])).agent;
});
afterAll(async () => {
  await server.stop();
  await fake.close();
  await other.close();
});

const lookUp = async (identifier: string, agent = contributor, on = server) => {
  const body = await on.graphql(
    agent,
    `mutation ($identifier: String!) { lookUpCitation(identifier: $identifier) {
      __typename ... on LookedUpCitation { bibtex known } ... on Refusal { code field message } } }`,
    { identifier },
  );
  if (body.errors) throw new Error(JSON.stringify(body.errors));
  return body.data.lookUpCitation;
};
const entry = (bibtex: string) => {
  const results = parseBibtex(bibtex);
  expect(results).toHaveLength(1);
  const [first] = results;
  if (!first || isProblem(first)) throw new Error(first?.problem ?? "no entry");
  return first;
};

describe("readIdentifier", () => {
  const doi = { kind: "doi", value: "10.5555/jdw.2027.0144", doi: "10.5555/jdw.2027.0144" };
  const arxiv = { kind: "arxiv", value: "3305.20251", doi: "10.48550/arxiv.3305.20251" };
  it.each([
    ["10.5555/JDW.2027.0144", doi],
    [" doi:10.5555/jdw.2027.0144 ", doi],
    ["https://doi.org/10.5555/jdw.2027.0144", doi],
    ["http://dx.doi.org/10.5555%2Fjdw.2027.0144", doi],
    ["3305.20251", arxiv],
    ["arXiv:3305.20251v2", arxiv],
    ["https://arxiv.org/abs/3305.20251", arxiv],
    ["https://arxiv.org/pdf/3305.20251v3.pdf", arxiv],
    ["10.48550/arXiv.3305.20251", arxiv],
    ["", null],
    ["ten.5555/x", null],
    ["10.5555/", null],
    ["10.5555/a b", null],
    ["10.5555/a\u0000b", null],
    ["10.5555/ünï", null],
    [`10.5555/${"x".repeat(400)}`, null],
    ["file:///etc/passwd", null],
    ["http://127.0.0.1/10.5555/x", null],
    ["../../10.5555/x", null],
  ])("reads %p", (text, identifier) => {
    expect(readIdentifier(text)).toEqual(identifier);
  });
});

it("a DOI becomes BibTeX that reads back as the paper, and says that it was looked up", async () => {
  const { bibtex, known } = await lookUp("https://doi.org/10.5555/jdw.2027.0144");
  expect(known).toBe(false);
  expect(bibtex).toMatch(/lookedup = \{10\.5555\/jdw\.2027\.0144, \d{4}-\d\d-\d\d\}/);
  expect(entry(bibtex)).toMatchObject({
    title: "Two lanterns behind the fog: damping wings at z above seven",
    authors: [
      { family: "Ørnefjeld", given: "Sunniva" },
      { family: "Harrowby", given: "C. P." },
      { family: "The Candlewick Team" },
    ],
    year: 2027,
    container: "Journal of Distant Weather",
    volume: "45",
    pages: "144–161",
    doi: "10.5555/jdw.2027.0144",
    arxiv: null,
  });
});

it("an arXiv number is asked for by its DOI and kept as a number", async () => {
  const { bibtex } = await lookUp("arXiv:3305.20251v1");
  expect(entry(bibtex)).toMatchObject({
    title: "A preprint about mist",
    arxiv: "3305.20251",
    doi: null,
    year: 2033,
  });
});

it("what was looked up is kept with a key of the registry, and found there the next time", async () => {
  const { bibtex } = await lookUp("10.5555/les.2028.0017");
  const keep = await server.graphql(
    contributor,
    `mutation ($bibtex: String!) { keepCitations(bibtex: $bibtex) {
      ... on KeptCitations { kept { created citation { key doi bibtex } } } } }`,
    { bibtex },
  );
  const [kept] = keep.data.keepCitations.kept;
  expect(kept).toMatchObject({
    created: true,
    citation: { key: expect.stringMatching(/^Quarrelow/i), doi: "10.5555/les.2028.0017" },
  });
  const stored = await server.dataSource.manager.findOneByOrFail(Citation, {
    doi: "10.5555/les.2028.0017",
  });
  expect(stored.sourceBibtex).toContain("lookedup");

  const before = asked.length;
  const again = await lookUp("10.5555/LES.2028.0017");
  expect(asked).toHaveLength(before);
  expect(again).toMatchObject({ known: true });
  expect(again.bibtex).toContain(kept.citation.key);
});

it("the identifier goes to the service encoded, as one part of the path", async () => {
  expect(await lookUp("10.5555/a(b)c;d?e#f")).toMatchObject({ known: false });
  expect(asked.at(-1)).toBe("/csl/10.5555%2Fa(b)c%3Bd%3Fe%23f");
});

it.each([
  ["an unknown paper", "10.5555/nobody.knows", "LOOK_UP_notFound"],
  ["a service that never answers", "10.5555/hangs", "LOOK_UP_timeOut"],
  ["an answer that never ends", "10.5555/half", "LOOK_UP_timeOut"],
  ["a service that fails", "10.5555/broken", "LOOK_UP_unreachable"],
  ["a page instead of an answer", "10.5555/page", "LOOK_UP_unreadable"],
  ["an answer that is no JSON", "10.5555/text", "LOOK_UP_unreadable"],
  ["an answer beyond 200 kB", "10.5555/large", "LOOK_UP_unreadable"],
  ["an answer without a title", "10.5555/untitled", "LOOK_UP_unreadable"],
  ["an empty list", "10.5555/list", "LOOK_UP_unreadable"],
  ["another paper", "10.5555/other", "LOOK_UP_otherPaper"],
  ["a redirect to another host or port", "10.5555/leaves", "LOOK_UP_unreachable"],
  ["redirects in a circle", "10.5555/circle", "LOOK_UP_unreachable"],
])("%s ends in a sentence that leads to pasting", async (_, identifier, code) => {
  const outcome = await lookUp(identifier);
  expect(outcome).toMatchObject({ __typename: "Refusal", code });
  expect(outcome.message).toMatch(/paste the BibTeX/i);
  expect(outcome.message).not.toMatch(/127\.0\.0\.1|stack|ECONN|fetch/);
});

it("a redirect within the service is followed", async () => {
  expect(entry((await lookUp("10.5555/stays")).bibtex)).toMatchObject({
    title: "A look through the mist",
    doi: "10.5555/stays",
  });
});

it("a service that is down is said to be unreachable", async () => {
  const gone = await startLookUpFake();
  await gone.close();
  const without = await startTestServer({ config: { lookUpUrl: gone.url } });
  try {
    const { agent } = await without.signedIn(["contributor"]);
    expect(await lookUp("10.5555/x", agent, without)).toMatchObject({
      code: "LOOK_UP_unreachable",
    });
  } finally {
    await without.stop();
  }
});

it("nothing in an answer acts as TeX or as another field", async () => {
  const { bibtex } = await lookUp("10.5555/tex");
  const read = entry(bibtex);
  expect(read.title).toBe("Fog & 50% \\input{/etc/passwd} $x$ alert(1) {");
  expect(bibtex).not.toMatch(/\\input|<script|elsewhere\.example|custom/);
  expect(read.raw.fields.has("x")).toBe(false);
});

it.each(["", "nonsense", "10.5555/", "x".repeat(100_000)])(
  "what is no identifier is refused at the field and asks nobody: %#",
  async (identifier) => {
    const before = asked.length;
    expect(await lookUp(identifier)).toMatchObject({ code: "IDENTIFIER", field: "identifier" });
    expect(asked).toHaveLength(before);
  },
);

it("without a service it says so, and the session tells the client beforehand", async () => {
  const without = await startTestServer({ limits: { lookUpsPerPerson: 1 } });
  try {
    const { agent } = await without.signedIn(["contributor"]);
    expect(await lookUp("10.5555/x", agent, without)).toMatchObject({ code: "NOT_CONFIGURED" });
    const told = await without.graphql(agent, "{ session { looksUpCitations } }");
    expect(told.data.session.looksUpCitations).toBe(false);
  } finally {
    await without.stop();
  }
  const told = await server.graphql(server.agent(), "{ session { looksUpCitations } }");
  expect(told.data.session.looksUpCitations).toBe(true);
});

it("a person looks up so many papers in an hour", async () => {
  const narrow = await startTestServer({
    config: { lookUpUrl: fake.url },
    limits: { lookUpsPerPerson: 1 },
  });
  try {
    const { agent } = await narrow.signedIn(["contributor"]);
    expect(await lookUp("10.5555/moved", agent, narrow)).toMatchObject({ known: false });
    expect(await lookUp("10.5555/moved", agent, narrow)).toMatchObject({
      code: "TOO_MANY_REQUESTS",
    });
  } finally {
    await narrow.stop();
  }
});
