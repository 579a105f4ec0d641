import { startTestServer, type TestServer } from "../support/harness";
import { accountOperations } from "./operations";

let server: TestServer;
let account: ReturnType<typeof accountOperations>;
beforeAll(async () => {
  server = await startTestServer();
  account = accountOperations(server);
});
afterAll(() => server.stop());

// 0000-0002-1825-0097 is the identifier of ORCID's own documentation, of a fictitious person.
const ORCID = "0000-0002-1825-0097";

it("name and ORCID are kept, in one spelling", async () => {
  const { agent, user } = await server.signedIn(["contributor"]);
  const answer = await account.updateProfile(
    agent,
    "  Mirelle   Ostrander ",
    `https://orcid.org/${ORCID}`,
  );
  expect(answer).toMatchObject({ id: user.id, nameOnPapers: "Mirelle Ostrander", orcid: ORCID });
  expect(await account.viewer(agent)).toEqual({
    id: user.id,
    email: user.email,
    nameOnPapers: "Mirelle Ostrander",
    furtherNames: [],
    orcid: ORCID,
    roles: ["contributor"],
  });
});

it("an empty ORCID takes the old one away", async () => {
  const { agent } = await server.signedIn([], { orcid: ORCID });
  expect(await account.updateProfile(agent, "Mirelle Ostrander", " ")).toMatchObject({
    orcid: null,
  });
});

it.each(["0000-0002-1825-0098", "not one", "0".repeat(50_000)])(
  "an ORCID whose check does not hold is refused at its field: %#",
  async (orcid) => {
    const { agent } = await server.signedIn();
    expect(await account.updateProfile(agent, "Mirelle Ostrander", orcid)).toMatchObject({
      code: "ORCID_INVALID",
      field: "orcid",
    });
  },
);

it("further names are kept once each, without the name as on papers, and stay until they are given again", async () => {
  const { agent } = await server.signedIn(["editor"]);
  const given = [" M.  Quellorn ", "M. Quellorn", "", "Mirelle Ostrander"];
  expect(await account.updateProfile(agent, "Mirelle Ostrander", null, given)).toMatchObject({
    furtherNames: ["M. Quellorn"],
  });
  await account.updateProfile(agent, "Mirelle O. Ostrander", null);
  expect(await account.viewer(agent)).toMatchObject({ furtherNames: ["M. Quellorn"] });
  await account.updateProfile(agent, "Mirelle O. Ostrander", null, []);
  expect(await account.viewer(agent)).toMatchObject({ furtherNames: [] });
});

it.each([
  ["TOO_MANY_NAMES", Array.from({ length: 11 }, (_, index) => `Name Number${index}`)],
  ["NAME_TOO_LONG", ["n".repeat(121)]],
  ["NAME_INVALID", ["A <b>name</b>"]],
])("further names are refused at their field: %s", async (code, names) => {
  const { agent } = await server.signedIn();
  expect(await account.updateProfile(agent, "Mirelle Ostrander", null, names)).toMatchObject({
    code,
    field: "furtherNames",
  });
});

it("nobody has no profile", async () => {
  const body = await server.graphql(
    server.agent(),
    'mutation { updateProfile(nameOnPapers: "A") { __typename } }',
  );
  expect(body.errors?.[0]?.extensions.code).toBe("UNAUTHENTICATED");
});
