import {
  type DraftBackend,
  type DraftContent,
  DraftKeeper,
  localKey,
  SAVE_DELAY_MS,
  type SaveOutcome,
  type ServerDraft,
} from "@/features/submission/draftKeeper";
import { emptyFields } from "~shared/statement/fields";

const ID = "5b0f";

function content(value: string | null): DraftContent {
  return {
    fields: { ...emptyFields(), value },
    citationId: "c1",
    answers: {},
    commentAnswers: {},
  };
}

function server(version: number, value: string | null): ServerDraft {
  return { version, updatedAt: "2026-12-01T12:04:00Z", content: content(value) };
}

function memory(): Storage {
  const kept = new Map<string, string>();
  return {
    getItem: (key: string) => kept.get(key) ?? null,
    setItem: (key: string, text: string) => void kept.set(key, text),
    removeItem: (key: string) => void kept.delete(key),
  } as unknown as Storage;
}

/** A server that answers each save in turn and remembers what it was sent. */
function backend(
  answers: ((content: DraftContent, version: number) => SaveOutcome)[],
  now: ServerDraft | null = null,
) {
  const sent: { content: DraftContent; version: number }[] = [];
  const talks: DraftBackend = {
    save(given, version) {
      sent.push({ content: given, version });
      const answer = answers[sent.length - 1] ?? takes;
      return Promise.resolve(answer(given, version));
    },
    load: () => Promise.resolve(now),
  };
  return { sent, talks };
}

const takes = (given: DraftContent, version: number): SaveOutcome => ({
  kind: "saved",
  draft: { version: version + 1, updatedAt: "2026-12-01T12:05:00Z", content: given },
});
const offline = (): SaveOutcome => ({ kind: "offline" });
const stale = (): SaveOutcome => ({ kind: "stale" });

describe("DraftKeeper", () => {
  beforeEach(() => jest.useFakeTimers());
  afterEach(() => jest.useRealTimers());

  it("sends several changes in one save, with the version it was given", async () => {
    const { sent, talks } = backend([]);
    const keeper = new DraftKeeper(ID, server(3, null), talks, memory());
    keeper.setField("value", "0.4");
    keeper.setField("value", "0.42");
    await jest.advanceTimersByTimeAsync(SAVE_DELAY_MS);
    expect(sent.map(({ version }) => version)).toEqual([3]);
    expect(sent[0]?.content.fields.value).toBe("0.42");
    expect(keeper.snapshot().version).toBe(4);
    expect(keeper.snapshot().save.kind).toBe("saved");
  });

  it("keeps an unsaved change in the browser and takes it up after a reload", async () => {
    const storage = memory();
    const first = new DraftKeeper(ID, server(3, null), backend([offline]).talks, storage);
    first.setField("value", "0.42");
    await jest.advanceTimersByTimeAsync(SAVE_DELAY_MS);
    expect(first.snapshot().save.kind).toBe("offline");
    first.stop();

    const { sent, talks } = backend([]);
    const second = new DraftKeeper(ID, server(3, null), talks, storage);
    expect(second.snapshot().content.fields.value).toBe("0.42");
    await jest.advanceTimersByTimeAsync(0);
    expect(sent[0]?.content.fields.value).toBe("0.42");
    expect(second.snapshot().save.kind).toBe("saved");
    expect(storage.getItem(localKey(ID))).toBeNull();
  });

  it("tries again by itself after a lost connection", async () => {
    const { sent, talks } = backend([offline, takes]);
    const keeper = new DraftKeeper(ID, server(1, null), talks, memory());
    keeper.setField("value", "0.42");
    await jest.advanceTimersByTimeAsync(SAVE_DELAY_MS);
    await jest.advanceTimersByTimeAsync(60_000);
    expect(sent).toHaveLength(2);
    expect(keeper.snapshot().save.kind).toBe("saved");
  });

  it("saves what was typed while a save was under way, with the version that save returned", async () => {
    let answer: (outcome: SaveOutcome) => void = () => undefined;
    const sent: number[] = [];
    const keeper = new DraftKeeper(
      ID,
      server(1, null),
      {
        save(given, version) {
          sent.push(version);
          if (sent.length > 1) return Promise.resolve(takes(given, version));
          return new Promise((resolve) => (answer = resolve));
        },
        load: () => Promise.resolve(null),
      },
      memory(),
    );
    keeper.setField("value", "0.4");
    await jest.advanceTimersByTimeAsync(SAVE_DELAY_MS);
    keeper.setField("value", "0.42");
    answer(takes(content("0.4"), 1));
    await jest.advanceTimersByTimeAsync(SAVE_DELAY_MS * 2);
    expect(sent).toEqual([1, 2]);
    expect(keeper.snapshot().content.fields.value).toBe("0.42");
    expect(keeper.snapshot().save.kind).toBe("saved");
  });

  it("offers both versions when another window saved a different one", async () => {
    const newer = server(5, "0.30");
    const { sent, talks } = backend([stale], newer);
    const keeper = new DraftKeeper(ID, server(3, null), talks, memory());
    keeper.setField("value", "0.42");
    await jest.advanceTimersByTimeAsync(SAVE_DELAY_MS);
    expect(keeper.snapshot().save).toEqual({ kind: "stale", newer });
    expect(keeper.snapshot().content.fields.value).toBe("0.42");

    await keeper.keepMine();
    expect(sent[1]?.version).toBe(5);
    expect(sent[1]?.content.fields.value).toBe("0.42");
    expect(keeper.snapshot().save.kind).toBe("saved");
  });

  it("takes the newer version when asked to, and lets its own go", async () => {
    const storage = memory();
    const { talks } = backend([stale], server(5, "0.30"));
    const keeper = new DraftKeeper(ID, server(3, null), talks, storage);
    keeper.setField("value", "0.42");
    await jest.advanceTimersByTimeAsync(SAVE_DELAY_MS);
    keeper.takeNewer();
    expect(keeper.snapshot().content.fields.value).toBe("0.30");
    expect(keeper.snapshot().version).toBe(5);
    expect(storage.getItem(localKey(ID))).toBeNull();
  });

  it("does not write while the person has not chosen between two versions", async () => {
    const { sent, talks } = backend([stale], server(5, "0.30"));
    const keeper = new DraftKeeper(ID, server(3, null), talks, memory());
    keeper.setField("value", "0.42");
    await jest.advanceTimersByTimeAsync(SAVE_DELAY_MS);
    keeper.setField("value", "0.43");
    await jest.advanceTimersByTimeAsync(60_000);
    expect(sent).toHaveLength(1);
    expect(keeper.snapshot().save.kind).toBe("stale");
  });

  it("goes on quietly when its own save arrived and only the answer was lost", async () => {
    const { talks } = backend([stale], server(4, " 0.42 ".trim()));
    const keeper = new DraftKeeper(ID, server(3, null), talks, memory());
    keeper.setField("value", "0.42 ");
    await jest.advanceTimersByTimeAsync(SAVE_DELAY_MS);
    expect(keeper.snapshot().save.kind).toBe("saved");
    expect(keeper.snapshot().version).toBe(4);
  });

  it("asks after a reload when the browser's copy and the server's have both moved on", () => {
    const storage = memory();
    storage.setItem(localKey(ID), JSON.stringify({ baseVersion: 3, content: content("0.42") }));
    const keeper = new DraftKeeper(ID, server(4, "0.30"), backend([]).talks, storage);
    expect(keeper.snapshot().save.kind).toBe("stale");
    expect(keeper.snapshot().content.fields.value).toBe("0.42");
  });

  it("reports whether everything is saved before a submission", async () => {
    const lost = new DraftKeeper(ID, server(1, null), backend([offline]).talks, memory());
    lost.setField("value", "0.42");
    expect(await lost.flush()).toBe(false);
    const kept = new DraftKeeper(ID, server(1, null), backend([]).talks, memory());
    kept.setField("value", "0.42");
    expect(await kept.flush()).toBe(true);
  });
});
