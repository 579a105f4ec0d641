import "reflect-metadata";

import { cutRelease } from "~server/release/release.service";
import { createLogger } from "~server/logging/logger";
import { buildApp } from "~server/app";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";

import request from "supertest";

import { actingAs, buildApproved, granted } from "../../factories/constraint";
import { startTestServer, type Agent, type TestServer } from "../support/harness";

const TABLE_KINDS = [
  "csv",
  "json",
  "ecsv",
  "vot",
  "txt",
  "tex",
  "bib",
  "methods.tex",
  "svg",
  "zip",
];
const RELEASE_KINDS = [
  "json",
  "csv",
  "ecsv",
  "vot",
  "txt",
  "bib",
  "cff",
  "citation.bib",
  "citation.json",
];

describe("a table over a release", () => {
  let server: TestServer;
  beforeAll(async () => {
    server = await startTestServer();
  });
  afterAll(() => server.stop());

  it("and the release keep their bytes through other data, an erratum and a restart; the erratum stands as a notice", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const editor = await server.signedIn(["editor"]);
    const maintainer = await server.signedIn(["maintainer"]);
    const stranger = server.agent();
    const add = (z: string) =>
      buildApproved(server.dataSource, contributor.user, editor.user, {
        z,
        dataUsed: [`Gorsewell ${z}`],
      });
    const record = await add("6.2");
    granted(await cutRelease(actingAs(server.dataSource, maintainer.user), "The first."));
    const save = async () => {
      const { data } = await server.graphql(
        contributor.agent,
        `mutation ($input: SaveRecipeInput!) { saveRecipe(input: $input) { __typename
          ... on FittingTable { slug digest } } }`,
        {
          input: {
            name: "Gorsewell",
            visibility: "public",
            recipe: { filter: { text: "Gorsewell" }, release: 1 },
          },
        },
      );
      return data.saveRecipe;
    };
    const table = await save();
    const addresses = [
      ...TABLE_KINDS.map((kind) => `/api/tables/${table.slug}@1.${kind}`),
      ...RELEASE_KINDS.map((kind) => `/api/releases/1.${kind}`),
    ];
    const bytes = async (agent: Agent) => {
      const found: [string, number, string][] = [];
      for (const address of addresses) {
        const { status, body } = await agent.get(address).buffer(true).parse(asBytes);
        found.push([address, status, (body as Buffer).toString("base64")]);
      }
      return found;
    };
    const before = await bytes(stranger);
    expect(before.map(([, status]) => status)).toEqual(addresses.map(() => 200));
    const notices = async () =>
      (
        await server.graphql(
          stranger,
          `{ release(number: 1) { notices { number notice { kind reason } } } }`,
        )
      ).data.release.notices;
    expect(await notices()).toEqual([]);

    await add("6.9");
    const reason = "The journal prints another sign.";
    const number = formatRecordNumber(record.constraintId);
    await server.graphql(
      maintainer.agent,
      `mutation ($number: String!, $reason: String!) {
        recordErratum(number: $number, reason: $reason) { __typename } }`,
      { number, reason },
    );
    expect(await notices()).toEqual([{ number, notice: { kind: "erratum", reason } }]);
    expect(await bytes(stranger)).toEqual(before);

    const restarted = await buildApp(
      { ...server.config, licence: "CC0 1.0" },
      server.dataSource,
      createLogger("silent"),
    );
    expect(await bytes(request.agent(restarted.app))).toEqual(before);
    await restarted.close();

    // The same recipe over the same release says the same.
    expect((await save()).digest).toBe(table.digest);
  });
});

function asBytes(res: NodeJS.EventEmitter, done: (error: Error | null, all: Buffer) => void): void {
  const parts: Buffer[] = [];
  res.on("data", (part: Buffer) => parts.push(part));
  res.on("end", () => done(null, Buffer.concat(parts)));
}
