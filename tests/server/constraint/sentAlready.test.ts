import { buildCitation, buildFields, buildSubmission } from "../../factories/constraint";
import { deskOf } from "../review/desk";
import { startTestServer, type TestServer } from "../support/harness";
import { formatRecordNumber } from "~shared/identifiers/recordNumber";

const CHECK = `query ($fields: ConstraintFieldsInput!, $citationId: ID) {
  checkFields(fields: $fields, citationId: $citationId) { code grade } }`;

interface Said {
  code: string;
  grade: string;
}

describe("a copy of what is still unread", () => {
  let server: TestServer;
  beforeAll(async () => {
    server = await startTestServer();
  });
  afterAll(() => server.stop());

  it("is told to whoever sent it, to nobody else, and never kept with the copy", async () => {
    const owner = await server.signedIn(["contributor"]);
    const other = await server.signedIn(["contributor", "editor"]);
    const paper = await buildCitation(server.dataSource, owner.user);
    const sent = await buildSubmission(server.dataSource, owner.user, {}, paper);
    const note = { code: `sentAlready.${formatRecordNumber(sent.constraintId)}`, grade: "note" };
    const variables = { fields: buildFields(), citationId: paper.id };
    const said = async (person: typeof owner): Promise<Said[]> =>
      (await server.graphql(person.agent, CHECK, variables)).data.checkFields;
    expect(await said(owner)).toEqual([note]);
    expect(await said(other)).toEqual([]);

    const hers = deskOf(server, owner.agent);
    const draft = await hers.start(paper.id);
    const saved = await hers.save(draft.id, 1, buildFields());
    expect(saved.findings).toMatchObject([note]);
    const copy = await hers.submit(draft.id, saved.version);
    // Whoever reads the copy blind would learn the numbers of the first.
    expect(copy).toMatchObject({ __typename: "Submission", findings: [] });

    const his = deskOf(server, other.agent);
    await his.claim(copy.id);
    const read = await his.read(copy.id, buildFields());
    expect(read.findings).toEqual([]);
    // In use, it is a near-duplicate like any other, for everybody.
    expect(await his.approve(copy.id, read.item.version)).toMatchObject({ __typename: "Done" });
    const duplicate = { code: `nearDuplicate.${copy.number}`, grade: "mustAnswer" };
    expect(await said(other)).toEqual([duplicate]);
    expect(await said(owner)).toEqual([duplicate, note]);
  });
});
