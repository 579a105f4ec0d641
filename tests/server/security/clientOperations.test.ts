import { readdirSync, readFileSync } from "node:fs";
import path from "node:path";

import {
  Kind,
  parse,
  print,
  visit,
  type DefinitionNode,
  type FragmentDefinitionNode,
  type OperationDefinitionNode,
} from "graphql";

import { startTestServer, type TestServer } from "../support/harness";

const FOLDER = path.join(__dirname, "../../../graphql/operations");

const definitions: readonly DefinitionNode[] = readdirSync(FOLDER)
  .filter((name) => name.endsWith(".graphql"))
  .flatMap((name) => parse(readFileSync(path.join(FOLDER, name), "utf8")).definitions);
const fragments = new Map(
  definitions
    .filter((each): each is FragmentDefinitionNode => each.kind === Kind.FRAGMENT_DEFINITION)
    .map((each) => [each.name.value, each]),
);
const operations = definitions.filter(
  (each): each is OperationDefinitionNode => each.kind === Kind.OPERATION_DEFINITION,
);

/** The operation with the fragments it uses, as the client sends it. */
function documentOf(operation: OperationDefinitionNode): string {
  const used = new Set<FragmentDefinitionNode>();
  const collect = (node: DefinitionNode): void => {
    visit(node, {
      FragmentSpread: ({ name }) => {
        const fragment = fragments.get(name.value);
        if (!fragment || used.has(fragment)) return;
        used.add(fragment);
        collect(fragment);
      },
    });
  };
  collect(operation);
  return [operation, ...used].map(print).join("\n");
}

let server: TestServer;
beforeAll(async () => {
  server = await startTestServer();
});
afterAll(() => server.stop());

it.each(operations.map((operation) => [operation.name?.value ?? "unnamed", operation] as const))(
  "what the client sends stays within the limits: %s",
  async (name, operation) => {
    const body = await server.graphql(server.agent(), documentOf(operation), { limit: 500 });
    const refused = (body.errors ?? []).filter(({ extensions, message }) => {
      const code = String(extensions.code);
      // Without the variables it needs an operation is refused too, but only after the limits of
      // shape; nobody may call most of them, which is told after the limit of cost.
      return code !== "UNAUTHENTICATED" && !(code === "BAD_USER_INPUT" && /Variable/.test(message));
    });
    expect({ name, refused }).toEqual({ name, refused: [] });
  },
);
