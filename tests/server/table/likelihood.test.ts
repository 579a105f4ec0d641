import "reflect-metadata";

import { seedDemonstration } from "~server/seed";
import { likelihoodOf } from "~server/table/likelihood";
import { TableVersion, TableVersionRow } from "~server/table/tableVersion.entity";
import { rowLikelihood } from "~shared/likelihood";
import { CompiledTable } from "~shared/likelihood/compile";
import { specOf } from "~shared/table/tableLikelihood";

import { TEST_PASSWORD_COST } from "../../factories/user";
import { startTestServer, type TestServer } from "../support/harness";

let server: TestServer;

beforeAll(async () => {
  server = await startTestServer();
  await seedDemonstration(server.dataSource, TEST_PASSWORD_COST);
});
afterAll(() => server.stop());

it("every saved table gives the likelihoods that its files name, and compiles", async () => {
  const { manager } = server.dataSource;
  const versions = await manager.find(TableVersion);
  expect(versions.length).toBeGreaterThanOrEqual(3);
  for (const version of versions) {
    const likelihood = await likelihoodOf(manager, version);
    const { slug, version: number } = version;
    const rows = await manager.find(TableVersionRow, {
      where: { slug, version: number, included: true },
      order: { position: "ASC" },
    });
    const formulas = likelihood.rows.map(({ used, options }) => {
      const row = rowLikelihood(used, options);
      return "leftOut" in row ? row.leftOut : row.formula;
    });
    expect(formulas).toEqual(rows.map((row) => JSON.parse(row.content).likelihood.formula));
    expect(formulas).toHaveLength(version.rowsIn);
    const compiled = new CompiledTable(specOf(likelihood));
    expect([...compiled.rowIds].sort()).toEqual(likelihood.rows.map((row) => row.number).sort());
  }
});
