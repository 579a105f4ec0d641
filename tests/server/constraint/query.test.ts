import type { User } from "~server/account/user.entity";
import type { Citation } from "~server/citation/citation.entity";
import { escapeLike } from "~server/constraint/constraint.query";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";
import type { ConstraintFields } from "~shared/statement/fields";

import { buildApproved, buildCitation, buildSubmission } from "../../factories/constraint";
import { startTestServer, type TestServer } from "../support/harness";

jest.setTimeout(120_000);

describe("the public list of constraints", () => {
  let server: TestServer;
  let contributor: User;
  let editor: User;
  let papers: Record<"early" | "late", Citation>;
  const numbers: Record<string, string> = {};

  const add = async (name: string, fields: Partial<ConstraintFields>, paper: Citation) => {
    const revision = await buildApproved(server.dataSource, contributor, editor, fields, paper);
    numbers[name] = formatRecordNumber(revision.constraintId);
  };

  beforeAll(async () => {
    server = await startTestServer();
    ({ user: contributor } = await server.signedIn(["contributor"], {
      nameOnPapers: "Ottla Firn",
    }));
    ({ user: editor } = await server.signedIn(["editor"], { nameOnPapers: "Brisa Kelm" }));
    papers = {
      early: await buildCitation(server.dataSource, contributor, {
        author: "Zorvalden, Ida",
        year: 2019,
        title: "Of 100% certain_fog",
      }),
      late: await buildCitation(server.dataSource, contributor, {
        author: 'M{\\"u}rwein, Jon and Zorvalden, Ida',
        year: 2024,
        title: "Of 1000 uncertain fogs",
      }),
    };
    await add("wing", { z: "7.1", dataUsed: ["QV 12-3"] }, papers.early);
    await add(
      "wing2",
      { z: "6.4", value: "0.2", dataUsed: ["qv 12\u22123", "other"] },
      papers.late,
    );
    await add(
      "pixels",
      {
        z: null,
        zLow: "5.4",
        zHigh: "5.8",
        zRole: "binAverage",
        kind: "upperLimit",
        value: "0.3",
        plus: null,
        minus: null,
        estimator: null,
        methodTags: ["darkPixels"],
        weighting: "unknown",
        dataUsed: ["forest"],
        versionRead: "preprint",
        preprintVersion: "2",
      },
      papers.late,
    );
    await add(
      "depth",
      {
        quantity: "opticalDepth",
        species: null,
        scale: null,
        weighting: null,
        z: null,
        zRole: null,
        value: "0.07",
        plus: "0.01",
        minus: "0.01",
        methodTags: ["cmbPolarization"],
        dataUsed: ["sky"],
      },
      papers.early,
    );
    for (const [name, value] of [
      ["a1", "0.61"],
      ["a2", "0.75"],
    ] as const) {
      await add(
        name,
        {
          z: "8.3",
          value,
          methodTags: ["equivalentWidths", "emitterFraction"],
          alternativesGroup: "Models",
          dataUsed: ["field"],
        },
        papers.late,
      );
    }
    await buildSubmission(server.dataSource, contributor, { z: "7.2", dataUsed: ["QV 12-3"] });
  });
  afterAll(() => server.stop());

  const list = async (filter: object, more = "") => {
    const { data, errors } = await server.graphql(
      server.agent(),
      `query ($filter: ConstraintFilter) { constraints(filter: $filter ${more}) {
        total registryTotal lastEvent { sequence } constraints { number } } }`,
      { filter },
    );
    if (errors) throw new Error(errors[0]?.message);
    return data.constraints;
  };
  const names = async (filter: object, more = ""): Promise<string[]> =>
    (await list(filter, more)).constraints.map(
      ({ number }: { number: string }) =>
        Object.entries(numbers).find(([, known]) => known === number)?.[0] ?? number,
    );

  it("holds what is approved, by redshift, and what has none at the end", async () => {
    expect(await names({})).toEqual(["pixels", "wing2", "wing", "a1", "a2", "depth"]);
    expect(await list({})).toMatchObject({ total: 6, registryTotal: 6 });
  });

  it("sorts the other ways", async () => {
    expect(await names({}, ", sort: redshiftDescending")).toEqual([
      "a1",
      "a2",
      "wing",
      "wing2",
      "pixels",
      "depth",
    ]);
    expect(await names({}, ", sort: number")).toEqual([
      "wing",
      "wing2",
      "pixels",
      "depth",
      "a1",
      "a2",
    ]);
    expect(await names({}, ", sort: newest")).toEqual([
      "a2",
      "a1",
      "depth",
      "pixels",
      "wing2",
      "wing",
    ]);
    expect(await names({}, ", sort: year")).toEqual([
      "wing2",
      "pixels",
      "a1",
      "a2",
      "wing",
      "depth",
    ]);
  });

  it("pages with the total of all pages", async () => {
    expect(await names({}, ", sort: number, offset: 1, limit: 2")).toEqual(["wing2", "pixels"]);
    expect(await list({}, ", offset: 5, limit: 2")).toMatchObject({ total: 6, constraints: [{}] });
    expect(await list({}, ", limit: 0")).toMatchObject({ total: 6, constraints: [] });
  });

  it("filters by family, tag, redshift, quantity, statement, weighting, version and year", async () => {
    expect(await names({ families: ["dampingWing"], zFrom: 6, zTo: 8 })).toEqual(["wing2", "wing"]);
    expect(await names({ families: ["dampingWing"], zFrom: 6.4, zTo: 6.4 })).toEqual(["wing2"]);
    expect(await names({ families: ["lineStrength", "cmb"] })).toEqual(["a1", "a2", "depth"]);
    expect(await names({ tags: ["emitterFraction"] })).toEqual(["a1", "a2"]);
    // A bin stands at its middle; what has no redshift is in no redshift range.
    expect(await names({ zTo: 5.6 })).toEqual(["pixels"]);
    expect(await names({ quantities: ["opticalDepth"] })).toEqual(["depth"]);
    expect(await names({ kinds: ["upperLimit"] })).toEqual(["pixels"]);
    expect(await names({ weightings: ["unknown"] })).toEqual(["pixels"]);
    expect(await names({ versions: ["preprint"] })).toEqual(["pixels"]);
    expect(await names({ yearTo: 2019 })).toEqual(["wing", "depth"]);
    expect(await names({ yearFrom: 2020, families: ["dampingWing"] })).toEqual(["wing2"]);
  });

  it("searches authors, title, key, number, printed text and data, every word of it", async () => {
    expect(await names({ text: "zorvalden" })).toHaveLength(6);
    expect(await names({ text: "murwein" })).toHaveLength(4);
    expect(await names({ text: "murwein field" })).toEqual(["a1", "a2"]);
    expect(await names({ text: "0.75" })).toEqual(["a2"]);
    expect(await names({ text: papers.early.key })).toEqual(["wing", "depth"]);
    expect(await names({ text: numbers.pixels })).toEqual(["pixels"]);
  });

  it("takes %, _, \\ and quotes in a search for themselves", async () => {
    expect(await names({ text: "100%" })).toEqual(["wing", "depth"]);
    expect(await names({ text: "n_f" })).toEqual(["wing", "depth"]);
    expect(await names({ text: "100% n_f" })).toEqual(["wing", "depth"]);
    for (const text of ["\\", "'", "' OR '1'='1", "!", "%%%", '"; DROP TABLE revision; --']) {
      expect(await names({ text })).toEqual([]);
    }
    expect(escapeLike("a!b%c_d")).toBe("a!!b!%c!_d");
  });

  it("links records that name the same data, however it is spelled, and alternatives of one paper", async () => {
    const of = async (number: string | undefined) =>
      (
        await server.graphql(
          server.agent(),
          "query ($number: String!) { constraint(number: $number) { sharesDataWith { number shortName via } alternatives { number via } } }",
          { number },
        )
      ).data.constraint;
    expect(await of(numbers.wing)).toEqual({
      // The submission over the same sightline is not approved and not named.
      sharesDataWith: [{ number: numbers.wing2, shortName: papers.late.shortName, via: "QV 12-3" }],
      alternatives: [],
    });
    expect((await of(numbers.a1)).alternatives).toEqual([
      { number: numbers.a1, via: "Models" },
      { number: numbers.a2, via: "Models" },
    ]);
  });

  it("reads numbers as people write them, and gives null for what it doesn't have", async () => {
    const digits = Number(numbers.wing?.slice(3));
    for (const written of [`fl-${digits}`, `${numbers.wing}.1`, ` ${numbers.wing} `]) {
      const { data } = await server.graphql(
        server.agent(),
        "query ($number: String!) { constraint(number: $number) { number } }",
        { number: written },
      );
      expect(data.constraint.number).toBe(numbers.wing);
    }
    const { data } = await server.graphql(
      server.agent(),
      '{ a: constraint(number: "FL-9999") { number } b: constraint(number: "x") { number } }',
    );
    expect(data).toEqual({ a: null, b: null });
  });

  it("asks the database as often for many records as for one", async () => {
    const counted = async (limit: number): Promise<number> => {
      const queries: string[] = [];
      const logger = server.dataSource.logger;
      server.dataSource.setOptions({
        logging: ["query"],
        logger: {
          logQuery: (query: string) => queries.push(query),
          logQueryError: () => undefined,
          logQuerySlow: () => undefined,
          logSchemaBuild: () => undefined,
          logMigration: () => undefined,
          log: () => undefined,
        },
      });
      await server.graphql(
        server.agent(),
        `{ constraints(limit: ${limit}) { constraints { number submittedBy readBy citation { key }
          sharesDataWith { number } alternatives { number } revisions { ordinal changes { field } } } } }`,
      );
      server.dataSource.setOptions({ logging: false, logger: "advanced-console" });
      server.dataSource.logger = logger;
      return queries.length;
    };
    // The state of the vocabulary; page, two totals, last event; names; two queries for alternatives; revisions; for shared data the
    // registry's names, aliases and relations, the names here and elsewhere, and the other records.
    expect(await counted(4)).toBe(15);
    expect(await counted(6)).toBe(15);
  });
});
