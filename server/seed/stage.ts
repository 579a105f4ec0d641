import type { EntityManager } from "typeorm";

import { Refusal } from "~server/common/outcomes";
import type { Acting } from "~server/event/acting";

import type { PaperName } from "./papers";
import type { PersonName } from "./people";

export const HOUR_MS = 3_600_000;
export const DAY_MS = 24 * HOUR_MS;

/** One step of the story: all of them are told in the order of their hours. */
export interface Step {
  at: Date;
  tell(at: Date): Promise<void>;
}

/** What the parts of the story need of its teller. */
export interface Stage {
  readonly manager: EntityManager;
  /** A person at an hour of the story; its mails aren't sent. */
  as(name: PersonName, now: Date): Acting;
  /** Number of a record that the story has told of already. */
  numberOf(name: string): string;
  /** Id of a paper, kept when it is first needed. */
  citation(paper: PaperName, who: Acting): Promise<string>;
}

/** The outcome, or an error that says in words what the services refused. */
export function done<T>(outcome: T | Refusal, what: string): T {
  if (outcome instanceof Refusal) {
    throw new Error(`the demonstration's ${what} was refused: ${outcome.code}, ${outcome.message}`);
  }
  return outcome;
}
