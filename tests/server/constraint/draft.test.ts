import { createDraft, findImported } from "~server/constraint/draft.service";
import { fieldsFromInput } from "~server/constraint/fields.type";
import { FieldCommentRecord } from "~server/review/comment.entity";
import { claim, returnSubmission } from "~server/review/review.service";
import { emptyFields } from "~shared/statement/fields";

import {
  actingAs,
  buildCitation,
  buildDraft,
  buildFields,
  buildSubmission,
  granted,
} from "../../factories/constraint";
import { startTestServer, type TestServer } from "../support/harness";
import { deskOf } from "../review/desk";

describe("drafts", () => {
  let server: TestServer;
  beforeAll(async () => {
    server = await startTestServer();
  });
  afterAll(() => server.stop());

  it("of one imported row are made once by a person, whatever became of the first", async () => {
    const one = await server.signedIn(["contributor"]);
    const other = await server.signedIn(["contributor"]);
    const make = (ownerId: string) =>
      server.dataSource.transaction((manager) =>
        createDraft(manager, {
          ownerId,
          citationId: null,
          fields: buildFields(),
          importIdentity: "file row 1",
        }),
      );
    const first = await make(one.user.id);
    await deskOf(server, one.agent).discard(first.id, 1);
    await expect(make(one.user.id)).rejects.toMatchObject({ code: "ER_DUP_ENTRY" });
    expect((await make(other.user.id)).state).toBe("draft");
    const known = ["file row 1", "file row 2"];
    expect(await findImported(server.dataSource.manager, one.user.id, known)).toEqual(
      new Set(["file row 1"]),
    );
  });

  it("leave nothing when their transaction fails", async () => {
    const { user } = await server.signedIn(["contributor"]);
    const count = async () =>
      Number(
        (
          await server.dataSource.query(
            "SELECT (SELECT COUNT(*) FROM constraint_record) + (SELECT COUNT(*) FROM event) n",
          )
        )[0].n,
      );
    const before = await count();
    await expect(
      server.dataSource.transaction(async (manager) => {
        await createDraft(manager, { ownerId: user.id, citationId: null, fields: emptyFields() });
        throw new Error("killed in the middle");
      }),
    ).rejects.toThrow("killed");
    expect(await count()).toBe(before);
  });

  it("keep printed numbers as typed and refuse a citation that isn't there", async () => {
    const { agent, user } = await server.signedIn(["contributor"]);
    const desk = deskOf(server, agent);
    const draft = await desk.start(null);
    const saved = await desk.save(draft.id, 1, {
      value: " 0.30 ",
      plus: "+0.10",
      minus: "O.1",
      dataUsed: ["a", " a", ""],
    });
    expect(saved.fields).toMatchObject({
      value: "0.30",
      plus: "+0.10",
      minus: "O.1",
      dataUsed: ["a"],
    });
    const unknown = "00000000-0000-4000-8000-000000000000";
    expect(await desk.save(draft.id, 2, {}, { citationId: unknown })).toMatchObject({
      code: "citation",
    });
    expect(await desk.start(unknown)).toMatchObject({ code: "citation" });
    expect(await desk.save(draft.id, 2, { remark: "x".repeat(2001) })).toMatchObject({
      code: "tooLong",
      field: "remark",
    });
    // A save that doesn't speak of the citation keeps it; null takes it away.
    const paper = await buildCitation(server.dataSource, user);
    expect((await desk.save(draft.id, 2, {}, { citationId: paper.id })).citation.key).toBe(
      paper.key,
    );
    expect((await desk.save(draft.id, 3, {})).citation.key).toBe(paper.key);
    expect((await desk.save(draft.id, 4, {}, { citationId: null })).citation).toBeNull();
  });

  it("answer only the comments of their own return", async () => {
    const contributor = await server.signedIn(["contributor"]);
    const editor = await server.signedIn(["editor"]);
    const submitted = await buildSubmission(server.dataSource, contributor.user);
    const who = actingAs(server.dataSource, editor.user);
    const claimed = granted(await claim(who, submitted.id));
    granted(
      await returnSubmission(who, submitted.id, claimed.version, [{ field: "z", text: "?" }], null),
    );
    const [comment] = await server.dataSource.manager.findBy(FieldCommentRecord, {
      revisionId: submitted.id,
    });
    const stranger = await server.signedIn(["contributor"]);
    const theirs = await buildDraft(server.dataSource, stranger.user, { z: "9.1" });
    await deskOf(server, stranger.agent).save(theirs.id, 1, buildFields(), {
      commentAnswers: [{ commentId: comment?.id, answer: "mine now" }],
    });
    const [after] = await server.dataSource.manager.findBy(FieldCommentRecord, { id: comment?.id });
    expect(after?.answer).toBeNull();
  });
});

describe("fieldsFromInput", () => {
  it("fills what is missing with open fields and turns empty texts into open ones", () => {
    expect(fieldsFromInput({ value: "", place: "  " })).toEqual({ fields: emptyFields() });
  });
});
