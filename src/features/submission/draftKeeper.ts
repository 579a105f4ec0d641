import type { ConstraintFields } from "~shared/statement/fields";

/** What a person types in the form, apart from the citation's own data. */
export interface DraftContent {
  fields: ConstraintFields;
  citationId: string | null;
  /** Answers to findings that must be answered, by finding code. */
  answers: Record<string, string>;
  /** Answers to the comments of a return, by comment id. */
  commentAnswers: Record<string, string>;
}

export interface ServerDraft {
  version: number;
  updatedAt: string;
  content: DraftContent;
}

export type SaveOutcome =
  | { kind: "saved"; draft: ServerDraft }
  | { kind: "stale" }
  | { kind: "refused"; message: string }
  | { kind: "signedOut" }
  | { kind: "offline" };

export interface DraftBackend {
  save(content: DraftContent, version: number): Promise<SaveOutcome>;
  /** The draft as the server holds it now; null when it can't be reached. */
  load(): Promise<ServerDraft | null>;
}

export type SaveState =
  | { kind: "saved"; at: string }
  | { kind: "waiting" }
  | { kind: "saving" }
  | { kind: "offline" }
  | { kind: "signedOut" }
  | { kind: "refused"; message: string }
  | { kind: "stale"; newer: ServerDraft };

export interface DraftSnapshot {
  content: DraftContent;
  version: number;
  save: SaveState;
}

interface LocalCopy {
  baseVersion: number;
  content: DraftContent;
}

export const SAVE_DELAY_MS = 800;
const RETRY_DELAYS_MS = [2_000, 5_000, 15_000, 30_000];

/** Where the unsaved copy of one draft lies in the browser. */
export function localKey(id: string): string {
  return `fogline.draft.${id}`;
}

function sameContent(a: DraftContent, b: DraftContent): boolean {
  return JSON.stringify(canonical(a)) === JSON.stringify(canonical(b));
}

/** Key order, outer space and empty answers carry no meaning; copies that differ in nothing else are one. */
function canonical(content: DraftContent): unknown {
  const sorted = (held: object) =>
    Object.entries(held)
      .map(([key, value]) => [key, tidy(value)] as const)
      .filter(([, value]) => value !== null)
      .sort(([a], [b]) => a.localeCompare(b));
  return [
    sorted(content.fields),
    content.citationId,
    sorted(content.answers),
    sorted(content.commentAnswers),
  ];
}

function tidy(value: unknown): unknown {
  if (typeof value !== "string") return value;
  return value.trim() === "" ? null : value.trim();
}

/**
 * Keeps one draft: every change lies in the browser at once and on the server soon after.
 *
 * One save is under way at a time, since each carries the version the one before returned. A copy
 * left in the browser by a reload or a lost connection is taken up again when its base version is
 * still the server's; otherwise the person chooses (`stale`).
 */
export class DraftKeeper {
  private snapshotNow: DraftSnapshot;
  private readonly listeners = new Set<() => void>();
  private timer: ReturnType<typeof setTimeout> | null = null;
  private running: Promise<void> | null = null;
  private failures = 0;
  private stopped = false;

  constructor(
    private readonly id: string,
    server: ServerDraft,
    private readonly backend: DraftBackend,
    private readonly storage: Pick<Storage, "getItem" | "setItem" | "removeItem"> | null,
  ) {
    this.snapshotNow = {
      content: server.content,
      version: server.version,
      save: { kind: "saved", at: server.updatedAt },
    };
    const local = this.readLocal();
    if (!local || sameContent(local.content, server.content)) {
      this.dropLocal();
    } else if (local.baseVersion === server.version) {
      this.snapshotNow = { ...this.snapshotNow, content: local.content, save: { kind: "waiting" } };
      this.schedule(0);
    } else {
      this.snapshotNow = {
        content: local.content,
        version: local.baseVersion,
        save: { kind: "stale", newer: server },
      };
    }
  }

  readonly subscribe = (listener: () => void): (() => void) => {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  };

  readonly snapshot = (): DraftSnapshot => this.snapshotNow;

  readonly change = (part: Partial<DraftContent>): void => {
    const content = { ...this.snapshotNow.content, ...part };
    const { save } = this.snapshotNow;
    // A pending choice between two versions, or a closed draft, is not decided by typing on.
    const keeps = save.kind === "stale" || save.kind === "signedOut";
    this.set({ content, save: keeps ? save : { kind: "waiting" } });
    this.writeLocal();
    if (!keeps) this.schedule(SAVE_DELAY_MS);
  };

  readonly setField = <N extends keyof ConstraintFields>(name: N, value: ConstraintFields[N]) =>
    this.change({ fields: { ...this.snapshotNow.content.fields, [name]: value } });

  /** Saves what waits, at once; resolves when nothing is under way. True when all is saved. */
  readonly flush = async (): Promise<boolean> => {
    this.clearTimer();
    while (this.running) await this.running;
    if (this.snapshotNow.save.kind !== "saved" && this.snapshotNow.save.kind !== "stale") {
      await this.run();
    }
    return this.snapshotNow.save.kind === "saved";
  };

  /** After a stale save: take the server's version and let one's own go. */
  readonly takeNewer = (): void => {
    const { save } = this.snapshotNow;
    if (save.kind !== "stale") return;
    this.dropLocal();
    this.set({
      content: save.newer.content,
      version: save.newer.version,
      save: { kind: "saved", at: save.newer.updatedAt },
    });
  };

  /** After a stale save: write one's own over the server's version. */
  readonly keepMine = (): Promise<boolean> => {
    const { save } = this.snapshotNow;
    if (save.kind === "stale") {
      this.set({ version: save.newer.version, save: { kind: "waiting" } });
      this.writeLocal();
    }
    return this.flush();
  };

  /** Takes over what another mutation returned (submitted, say) as the saved state. */
  readonly adopt = (draft: ServerDraft): void => {
    this.clearTimer();
    this.dropLocal();
    this.set({
      content: draft.content,
      version: draft.version,
      save: { kind: "saved", at: draft.updatedAt },
    });
  };

  /** Forgets the copy in the browser, for a draft that was discarded. */
  readonly forget = (): void => {
    this.stop();
    this.dropLocal();
  };

  /** Ends timers; what is unsaved stays in the browser. */
  readonly stop = (): void => {
    this.stopped = true;
    this.clearTimer();
  };

  /** A keeper stopped by an unmount goes on when its screen comes back. */
  readonly resume = (): void => {
    this.stopped = false;
    if (this.snapshotNow.save.kind === "waiting") this.schedule(SAVE_DELAY_MS);
  };

  private schedule(delay: number): void {
    this.clearTimer();
    if (this.stopped) return;
    this.timer = setTimeout(() => {
      this.timer = null;
      void this.run();
    }, delay);
  }

  private clearTimer(): void {
    if (this.timer) clearTimeout(this.timer);
    this.timer = null;
  }

  private run(): Promise<void> {
    this.running ??= this.saveOnce().finally(() => {
      this.running = null;
    });
    return this.running;
  }

  private async saveOnce(): Promise<void> {
    const { content, version } = this.snapshotNow;
    this.set({ save: { kind: "saving" } });
    const outcome = await this.backend.save(content, version);
    switch (outcome.kind) {
      case "saved":
        return this.saved(content, outcome.draft);
      case "stale":
        return this.stale(content);
      case "offline":
        this.set({ save: { kind: "offline" } });
        this.schedule(RETRY_DELAYS_MS[Math.min(this.failures++, RETRY_DELAYS_MS.length - 1)]!);
        return;
      case "signedOut":
        return this.set({ save: { kind: "signedOut" } });
      case "refused":
        this.set({ save: { kind: "refused", message: outcome.message } });
        if (this.snapshotNow.content !== content) this.schedule(SAVE_DELAY_MS);
    }
  }

  private saved(sent: DraftContent, draft: ServerDraft): void {
    this.failures = 0;
    const typedOn = this.snapshotNow.content !== sent;
    // The person's own text stays in the form: the server may have trimmed it, and a cursor in it would jump.
    this.set({
      version: draft.version,
      save: typedOn ? { kind: "waiting" } : { kind: "saved", at: draft.updatedAt },
    });
    if (typedOn) {
      this.writeLocal();
      this.schedule(SAVE_DELAY_MS);
    } else {
      this.dropLocal();
    }
  }

  private async stale(sent: DraftContent): Promise<void> {
    const newer = await this.backend.load();
    if (!newer) {
      this.set({ save: { kind: "offline" } });
      this.schedule(RETRY_DELAYS_MS[0]!);
    } else if (sameContent(newer.content, sent)) {
      // Our own save arrived and only its answer was lost.
      this.saved(sent, newer);
    } else {
      this.set({ save: { kind: "stale", newer } });
    }
  }

  private set(part: Partial<DraftSnapshot>): void {
    this.snapshotNow = { ...this.snapshotNow, ...part };
    for (const listener of this.listeners) listener();
  }

  private readLocal(): LocalCopy | null {
    try {
      const text = this.storage?.getItem(localKey(this.id));
      return text ? (JSON.parse(text) as LocalCopy) : null;
    } catch {
      return null;
    }
  }

  private writeLocal(): void {
    const { content, version } = this.snapshotNow;
    try {
      const copy: LocalCopy = { baseVersion: version, content };
      this.storage?.setItem(localKey(this.id), JSON.stringify(copy));
    } catch {
      // A full or forbidden store leaves the server's copy, saved within a second.
    }
  }

  private dropLocal(): void {
    try {
      this.storage?.removeItem(localKey(this.id));
    } catch {
      // As above.
    }
  }
}
