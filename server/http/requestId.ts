import { AsyncLocalStorage } from "node:async_hooks";
import { randomUUID } from "node:crypto";

import type { RequestHandler } from "express";

const current = new AsyncLocalStorage<string>();

/** Id of the request being answered; "none" outside a request. */
export function requestId(): string {
  return current.getStore() ?? "none";
}

/**
 * Gives each request an id of our own, in the log, in X-Request-Id and in every error.
 * An id sent by the caller is not taken over: it would let anybody write into the log.
 */
export const withRequestId: RequestHandler = (req, res, next) => {
  const id = randomUUID();
  req.id = id;
  res.setHeader("X-Request-Id", id);
  current.run(id, next);
};
