import { ApolloClient, ApolloLink, gql, InMemoryCache, Observable } from "@apollo/client";

import { vocabularyLink } from "@/apollo/vocabularyLink";
import { SessionDocument } from "~graphql/generated/graphql";
import { START_VOCABULARY } from "~shared/methods/startVocabulary";
import { methodTags, onVocabularyChange, setVocabulary } from "~shared/methods/vocabulary";

const LIST = gql`
  query List {
    total
  }
`;

/** Answers of the session, each method as the API gives it. */
const session = (name: string) => ({
  session: {
    __typename: "Session",
    demonstration: false,
    licence: "CC BY 4.0",
    lastEvent: null,
    viewer: null,
  },
  methodVocabulary: START_VOCABULARY.map((entry, index) => ({
    __typename: "MethodTag",
    ...entry,
    ...(entry.tag === "darkGaps" ? { name } : {}),
    aliases: [...entry.aliases],
    position: index,
    version: 1,
  })),
});

interface Wire {
  asked: string[];
  answer(operation: string, data: object | Error): void;
}

/** A client whose answers come when a test says so. */
function connect(): { client: ApolloClient; wire: Wire } {
  const asked: string[] = [];
  const waiting = new Map<string, (data: object | Error) => void>();
  const end = new ApolloLink(
    ({ operationName = "" }) =>
      new Observable((observer) => {
        asked.push(operationName);
        waiting.set(operationName, (data) => {
          if (data instanceof Error) return observer.error(data);
          observer.next({ data: data as Record<string, unknown> });
          observer.complete();
        });
      }),
  );
  const client = new ApolloClient({
    link: ApolloLink.from([vocabularyLink(), end]),
    cache: new InMemoryCache(),
  });
  return {
    client,
    wire: { asked, answer: (operation, data) => waiting.get(operation)?.(data) },
  };
}

const turn = () => new Promise((resolve) => setTimeout(resolve, 0));
const nameInForce = () => methodTags().find(({ tag }) => tag === "darkGaps")?.name;

describe("the method vocabulary of the client", () => {
  beforeEach(() => setVocabulary(START_VOCABULARY));

  it("is in force before any other answer arrives, with both requests sent at once", async () => {
    const { client, wire } = connect();
    const first = client.query({ query: SessionDocument });
    let name: string | undefined;
    const list = client.query({ query: LIST }).then(() => {
      name = nameInForce();
    });
    await turn();
    expect(wire.asked).toEqual(["Session", "List"]);
    wire.answer("List", { total: 3 });
    await turn();
    expect(name).toBeUndefined();
    wire.answer("Session", session("Gaps without light"));
    await Promise.all([first, list]);
    expect(name).toBe("Gaps without light");
  });

  it("stays that of the start when the session fails, and holds nothing up", async () => {
    const { client, wire } = connect();
    const first = client.query({ query: SessionDocument }).catch(() => "failed");
    const list = client.query({ query: LIST });
    await turn();
    wire.answer("List", { total: 3 });
    wire.answer("Session", new Error("no connection"));
    expect(await first).toBe("failed");
    expect((await list).data).toEqual({ total: 3 });
    expect(nameInForce()).toBe("Dark gaps");
  });

  it("passes later answers on at once, and tells of a change only when there is one", async () => {
    const { client, wire } = connect();
    const changes = jest.fn();
    const stop = onVocabularyChange(changes);
    for (const name of ["Gaps A", "Gaps A", "Gaps B"]) {
      const again = client.query({ query: SessionDocument, fetchPolicy: "network-only" });
      await turn();
      wire.answer("Session", session(name));
      await again;
      expect(nameInForce()).toBe(name);
    }
    expect(changes).toHaveBeenCalledTimes(2);
    stop();
    const list = client.query({ query: LIST });
    await turn();
    wire.answer("List", { total: 4 });
    expect((await list).data).toEqual({ total: 4 });
  });

  it("waits for no session that nobody asked for", async () => {
    const { client, wire } = connect();
    const list = client.query({ query: LIST });
    await turn();
    wire.answer("List", { total: 5 });
    expect((await list).data).toEqual({ total: 5 });
  });
});
