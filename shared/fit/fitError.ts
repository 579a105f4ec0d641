import { DomainError } from "~shared/errors/DomainError";

/** A fit that can't be made: the message says why, in a sentence for whoever asked for it. */
export class FitError extends Error {
  override readonly name = "FitError";
}

/** The same failure as a sentence; anything but a malformed argument passes unchanged. */
export function asFitError(error: unknown): unknown {
  if (!(error instanceof DomainError)) return error;
  return new FitError(`${error.message.charAt(0).toUpperCase()}${error.message.slice(1)}.`);
}
