/** How far a long computation is. */
export interface Progress {
  readonly stage: string;
  /** From 0 to 1 within the stage. */
  readonly fraction: number;
}

/**
 * A long computation that hands over control between slices. It holds no clock and no thread: whoever
 * runs it decides how long a slice may be, shows the progress and may stop.
 */
export type Task<T> = Generator<Progress, T, void>;

/** Thrown by a runner when it is told to stop. */
export class CancelledError extends Error {
  override readonly name = "CancelledError";
  /** Says so in a sentence; nothing else is known. */
  constructor() {
    super("The computation was stopped.");
  }
}

/** What a runner does between slices. */
export interface TaskControl {
  /** Called between slices. */
  readonly onProgress?: (progress: Progress) => void;
  /** Asked between slices; true stops with a CancelledError. */
  readonly cancelled?: () => boolean;
}

/**
 * Runs a task to its end in one go.
 *
 * @returns What the task computes.
 * @throws {CancelledError} When told to stop.
 */
export function runTask<T>(task: Task<T>, control: TaskControl = {}): T {
  for (;;) {
    const step = task.next();
    if (step.done) return step.value;
    control.onProgress?.(step.value);
    if (control.cancelled?.()) throw new CancelledError();
  }
}

/**
 * Runs a task, letting others in after every slice.
 *
 * @param breathe - Resolves when the next slice may run: a timer, an animation frame, a message.
 * @throws {CancelledError} When told to stop.
 */
export async function runTaskInSlices<T>(
  task: Task<T>,
  breathe: () => Promise<void>,
  control: TaskControl = {},
): Promise<T> {
  for (;;) {
    const step = task.next();
    if (step.done) return step.value;
    control.onProgress?.(step.value);
    await breathe();
    if (control.cancelled?.()) throw new CancelledError();
  }
}
