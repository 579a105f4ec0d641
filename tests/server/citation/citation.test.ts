import { readFileSync } from "node:fs";
import { join } from "node:path";

import { isProblem, parseBibtex } from "~server/citation/bibtex";
import { Citation } from "~server/citation/citation.entity";
import type { Role } from "~shared/review/states";

import { startTestServer, type Agent, type TestServer } from "../support/harness";

const sample = readFileSync(join(__dirname, "../../fixtures/samples/group-list.bib"), "utf8");

// A database is made first, on a machine that may be busy.
jest.setTimeout(60_000);

let server: TestServer;
let contributor: Agent;

beforeAll(async () => {
  server = await startTestServer();
});
afterAll(() => server.stop());
beforeEach(async () => {
  await server.dataSource.manager.createQueryBuilder().delete().from(Citation).execute();
  contributor = (await server.signedIn(["contributor"])).agent;
});

const PREVIEW = `query Preview($bibtex: String!) {
  previewCitations(bibtex: $bibtex) {
    index line givenKey matchedBy problem remarks
    citation { key entryType authors title year container volume pages doi arxiv bibcode shortName }
    existing { id key }
  }
}`;

const KEEP = `mutation Keep($bibtex: String!, $indices: [Int!]) {
  keepCitations(bibtex: $bibtex, indices: $indices) {
    __typename
    ... on KeptCitations {
      kept { index created citation { id key doi arxiv bibcode title shortName bibtex csl authors } }
      problems { index line givenKey problem }
    }
    ... on Refusal { code message field }
  }
}`;

async function preview(bibtex: string, agent = contributor) {
  const body = await server.graphql(agent, PREVIEW, { bibtex });
  if (body.errors) throw new Error(JSON.stringify(body.errors));
  return body.data.previewCitations;
}

async function keep(bibtex: string, indices: number[] | null = null, agent = contributor) {
  const body = await server.graphql(agent, KEEP, { bibtex, indices });
  if (body.errors) throw new Error(JSON.stringify(body.errors));
  return body.data.keepCitations;
}

const count = () => server.dataSource.manager.count(Citation);

function entry(key: string, fields: string): string {
  return `@article{${key}, ${fields}}\n`;
}
const paper = (extra: string, title = "Damping wings of seven distant quasars") =>
  entry("k", `author = {Tarrowin, A. and Osuwande, B.}, title = {${title}}, year = 2031, ${extra}`);

describe("who may", () => {
  const MY = `query My($id: ID!) { myCitation(id: $id) { key } }`;

  it.each([[[]], [["editor"]], [["maintainer"]]] as [Role[]][])(
    "%j: neither look up nor keep",
    async (roles) => {
      const { agent } = await server.signedIn(roles);
      for (const query of [PREVIEW, KEEP]) {
        const { errors } = await server.graphql(agent, query, { bibtex: sample });
        expect(errors?.[0]?.extensions.code).toBe("FORBIDDEN");
      }
      const { errors } = await server.graphql(agent, MY, { id: "x" });
      expect(errors?.[0]?.extensions.code).toBe("FORBIDDEN");
      expect(await count()).toBe(0);
    },
  );

  it("nobody: neither look up nor keep", async () => {
    for (const [query, variables] of [
      [PREVIEW, { bibtex: sample }],
      [KEEP, { bibtex: sample }],
      [MY, { id: "x" }],
    ] as const) {
      const { errors } = await server.graphql(server.agent(), query, variables);
      expect(errors?.[0]?.extensions.code).toBe("UNAUTHENTICATED");
    }
    expect(await count()).toBe(0);
  });

  it("a contributor finds a kept citation again by its id", async () => {
    const { kept } = await keep(paper(""));
    const { data } = await server.graphql(contributor, MY, { id: kept[0].citation.id });
    expect(data.myCitation).toEqual({ key: "Tarrowin2031" });
    const unknown = await server.graphql(contributor, MY, { id: "no-such-id" });
    expect(unknown.data.myCitation).toBeNull();
  });
});

describe("preview", () => {
  it("shows each paper as it will be cited and keeps nothing", async () => {
    const entries = await preview(sample);
    expect(entries).toHaveLength(12);
    expect(entries[0]).toMatchObject({
      index: 0,
      line: 1,
      givenKey: "Arvensis2031",
      problem: null,
      existing: null,
      citation: {
        authors: ["Arvensis, L.", "Müllerova, P.", "de Groot-Larsen, A. B.", "Šedivý, J."],
        container: "ApJ",
        doi: "10.5555/apj.2031.0077",
        arxiv: "3101.01234",
        bibcode: "2031ApJ..1201...77A",
        shortName: "Arvensis et al. 2031",
      },
    });
    expect(entries[2].citation.authors).toEqual([
      "Coral Fields Collaboration",
      "Tamm, R.",
      "and others",
    ]);
    expect(await count()).toBe(0);
  });

  it("names line and reason of a broken entry and still shows the others", async () => {
    const [first, second] = await preview(`@misc{bad, title = {T}\n  year = 2031}\n${paper("")}`);
    expect(first).toMatchObject({ givenKey: "bad", line: 2, citation: null });
    expect(first.problem).toContain("comma is missing");
    expect(second).toMatchObject({ problem: null, citation: { year: 2031 } });
  });

  it("says that two entries of one text are one paper", async () => {
    const doi = "doi = {10.5555/one}";
    const [, second] = await preview(paper(doi) + paper(doi));
    expect(second.remarks.join(" ")).toContain("same paper as entry 1");
  });
});

describe("keep", () => {
  it("gives each paper a key of first author and year in ASCII", async () => {
    const { kept, problems } = await keep(sample);
    expect(problems).toEqual([]);
    expect(kept.map((one: { citation: { key: string } }) => one.citation.key)).toEqual([
      "Arvensis2031",
      "Brodowska2029",
      "CoralFields2033",
      "Dresnok2030",
      "Eisvogel2034",
      "Fjellheim2028",
      "Gannet2032",
      "Halcyon2035",
      "Isbrand2033",
      "Jorvik2031",
      "Kittiwake2030",
      "Lorikeet2029",
    ]);
    expect(await count()).toBe(12);
  });

  it.each([
    ["{\\v{S}ediv{\\'y}, J.}", "Sedivy2031"],
    ["{van der Zee, M.}", "VanDerZee2031"],
    ["{{\\AA}s, K.}", "As2031"],
    ["{O'Fenn, N.}", "OFenn2031"],
    ["{岡本, 太}", "Paper2031"],
    ["{{The Halcyon Team}}", "Halcyon2031"],
  ])("author %s gives the key %s", async (author, key) => {
    const { kept } = await keep(entry("x", `author = ${author}, title = {T}, year = 2031`));
    expect(kept[0].citation.key).toBe(key);
  });

  it("a second paper of one author and year gets a letter", async () => {
    const keys: string[] = [];
    for (const title of ["First of them", "Second of them", "Third of them"]) {
      keys.push((await keep(paper("", title))).kept[0].citation.key);
    }
    expect(keys).toEqual(["Tarrowin2031", "Tarrowin2031b", "Tarrowin2031c"]);
  });

  it("keeps the text as it came beside what was read from it", async () => {
    const text = paper("journal = {\\apj}, keywords = {x}").trim();
    await keep(text);
    const [citation] = await server.dataSource.manager.find(Citation);
    expect(citation!.sourceBibtex).toBe(text);
    expect(JSON.parse(citation!.csl)).toMatchObject({
      id: "Tarrowin2031",
      "container-title": "ApJ",
      type: "article-journal",
    });
  });

  it("keeps the readable entries and tells of the others", async () => {
    const result = await keep(`@misc{bad, title = {T\n${paper("")}`);
    expect(result.kept).toHaveLength(1);
    expect(result.kept[0].index).toBe(1);
    expect(result.problems).toMatchObject([{ index: 0, givenKey: "bad" }]);
  });

  it("keeps only the chosen entries", async () => {
    const { kept } = await keep(sample, [3]);
    expect(kept).toMatchObject([{ index: 3, created: true, citation: { key: "Dresnok2030" } }]);
    expect(await count()).toBe(1);
  });

  it("refuses when nothing can be read, and an entry that is not there", async () => {
    expect(await keep("@misc{bad")).toMatchObject({ __typename: "Refusal", code: "unreadable" });
    expect(await keep(sample, [12])).toMatchObject({ __typename: "Refusal", code: "unknownEntry" });
    expect(await keep(sample, [-1])).toMatchObject({ __typename: "Refusal" });
    expect(await keep(sample, [])).toMatchObject({ __typename: "Refusal" });
    expect(await count()).toBe(0);
  });

  it("markup and SQL in a title are text like any other", async () => {
    const title = "Robert'); DROP TABLE citation;-- <script>alert(1)</script>";
    const { kept } = await keep(paper("", title));
    expect(kept[0].citation.title).toBe(title.replace("--", "–"));
    expect(await count()).toBe(1);
  });
});

describe("a paper that is already there", () => {
  async function foundAfter(first: string, second: string) {
    const kept = (await keep(first)).kept[0];
    const [shown] = await preview(second);
    const again = await keep(second);
    return { kept, shown, again: again.kept[0] };
  }

  it.each([
    ["doi", "doi = {10.5555/ABC}", "doi = {https://doi.org/10.5555/abc}"],
    ["arxiv", "eprint = {3101.01234}", "eprint = {arXiv:3101.01234v2}"],
    [
      "bibcode",
      "bibcode = {2031ApJ..1201...77A}",
      "adsurl = {https://e.org/abs/2031ApJ..1201...77A}",
    ],
  ])("is found by %s whatever the title says", async (matchedBy, first, second) => {
    const { kept, shown, again } = await foundAfter(
      paper(first, "One title of a paper"),
      paper(second, "Quite different words here"),
    );
    expect(shown).toMatchObject({ matchedBy, existing: { id: kept.citation.id } });
    expect(shown.remarks.join(" ")).toContain("another title");
    expect(again).toMatchObject({ created: false, citation: { id: kept.citation.id } });
    expect(await count()).toBe(1);
  });

  it.each([
    ["Ly$\\alpha$ emitters at {z} = 7", "Lyman-alpha Emitters at z=7"],
    ["{Damping wings: the \\'etude}", "Damping Wings -- the etude"],
    [
      "The neutral fraction of the intergalactic medium",
      "The neutral fracton of the intergalactic medium",
    ],
  ])("is found by title: %s", async (first, second) => {
    const later = paper("", second).replace("2031", "2032");
    const { shown, again } = await foundAfter(paper("", first), later);
    expect(shown.matchedBy).toBe("title");
    expect(again.created).toBe(false);
  });

  it.each([
    [
      "another part of a series",
      paper("", "Results of the long deep survey. III. Limits"),
      paper("", "Results of the long deep survey. IV. Limits"),
    ],
    [
      "another redshift in the title",
      paper("", "The neutral hydrogen fraction at redshift 7.0"),
      paper("", "The neutral hydrogen fraction at redshift 7.3"),
    ],
    ["another first author", paper(""), paper("").replace("Tarrowin, A. and ", "")],
    ["two years on", paper(""), paper("").replace("2031", "2033")],
    ["another DOI", paper("doi = {10.5555/a}"), paper("doi = {10.5555/b}")],
    [
      "a thesis of the same title",
      paper(""),
      paper("school = {U}").replace("@article", "@phdthesis"),
    ],
  ])("is not taken for %s", async (_what, first, second) => {
    const { shown, again } = await foundAfter(first, second);
    expect(shown.existing).toBeNull();
    expect(again.created).toBe(true);
    expect(await count()).toBe(2);
  });

  it("is found by title when neither gives a year", async () => {
    const undated = paper("").replace("year = 2031, ", "");
    const { kept, shown } = await foundAfter(undated, undated);
    expect(kept.citation.key).toBe("TarrowinUndated");
    expect(shown.matchedBy).toBe("title");
    expect(await count()).toBe(1);
  });

  it("a nearly equal title with another DOI is remarked on", async () => {
    const { shown } = await foundAfter(paper("doi = {10.5555/a}"), paper("doi = {10.5555/b}"));
    expect(shown.remarks.join(" ")).toContain(
      "Tarrowin2031 in the registry has nearly the same title",
    );
  });

  it("identifiers of two papers in one entry: the DOI counts, and it is said", async () => {
    await keep(paper("doi = {10.5555/a}", "First of all papers"));
    await keep(paper("eprint = {3101.00001}", "Second of all papers"));
    const [shown] = await preview(
      paper("doi = {10.5555/a}, eprint = {3101.00001}", "First of all papers"),
    );
    expect(shown).toMatchObject({ matchedBy: "doi", existing: { key: "Tarrowin2031" } });
    expect(shown.remarks.join(" ")).toContain(
      "belongs to another paper in the registry, Tarrowin2031b",
    );
  });

  it.each([
    ["by DOI", paper("doi = {10.5555/race}")],
    ["by title alone", paper("")],
  ])("ten people bring it at once: one citation, %s", async (_how, text) => {
    const results = await Promise.all(Array.from({ length: 10 }, () => keep(text)));
    const kept = results.map((result) => result.kept[0]);
    expect(kept.filter((one) => one.created)).toHaveLength(1);
    expect(new Set(kept.map((one) => one.citation.id)).size).toBe(1);
    expect(await count()).toBe(1);
  });

  it("ten people bring ten papers of one author and year at once: ten keys", async () => {
    const results = await Promise.all(
      Array.from({ length: 10 }, (_, n) =>
        keep(paper(`doi = {10.5555/${n}}`, `Title number ${n}`)),
      ),
    );
    expect(new Set(results.map((result) => result.kept[0].citation.key)).size).toBe(10);
  });

  it("two texts in opposite order at once end with one citation a paper", async () => {
    const papers = Array.from({ length: 6 }, (_, n) =>
      paper(`doi = {10.5555/${n}}`, `Title number ${n}`),
    );
    await Promise.all([keep(papers.join("")), keep([...papers].reverse().join(""))]);
    expect(await count()).toBe(6);
  });
});

describe("out again", () => {
  it("what comes back is read as what went in, macros, accents, eprint and braces kept", async () => {
    const { kept } = await keep(sample);
    const before = parseBibtex(sample);
    for (const { index, citation } of kept) {
      const original = before[index]!;
      if (isProblem(original)) throw new Error(original.problem);
      const [after, ...rest] = parseBibtex(citation.bibtex);
      if (!after || isProblem(after)) throw new Error(JSON.stringify(after));
      expect(rest).toEqual([]);
      expect(after.givenKey).toBe(citation.key);
      const { raw: rawBefore, line: _l, givenKey: _k, csl: cslBefore, ...first } = original;
      const { raw: rawAfter, line: _m, givenKey: _n, csl: cslAfter, ...second } = after;
      expect(second).toEqual(first);
      expect(cslAfter).toEqual(cslBefore);
      const values = (raw: typeof rawBefore) =>
        [...raw.fields.values()].map(({ name, value }) => [name, value]);
      expect(values(rawAfter)).toEqual(values(rawBefore));
    }
    expect(kept[0].citation.bibtex).toContain("{\\v{S}ediv{\\'y}}, J.}");
    expect(kept[0].citation.bibtex).toContain("journal = {\\apj}");
    expect(kept[0].citation.bibtex).toContain("\\providecommand{\\apj}{ApJ}");
    expect(kept[2].citation.bibtex).toContain("eprint = {arXiv:3306.09999v2}");
    expect(kept[7].citation.bibtex).toContain("author = {{Halcyon Team}}");
  });
});
