import type { Request, RequestHandler, Response } from "express";

import { HttpProblem, tooManySentence } from "~server/common/errors";

import type { Limit, Spent } from "./rateLimits";

/** Who is counted: the person behind an API token, else the address. */
function callerKey(req: Request): string {
  return req.bearer ? `person:${req.bearer.viewer.id}` : (req.ip ?? "unknown");
}

/** Holds callers to a limit, and tells each of them where they stand. */
export function limitTo(limit: Limit, name: string): RequestHandler {
  return async (req, res, next) => {
    const spent = await limit.spend(callerKey(req));
    tell(res, name, spent);
    if (spent.wait > 0) throw tooMany(spent.wait);
    next();
  };
}

/** Reading has one limit, everything else another. */
export function limitByMethod(reading: Limit, writing: Limit): RequestHandler {
  const read = limitTo(reading, "downloads");
  const write = limitTo(writing, "uploads");
  return (req, res, next) =>
    req.method === "GET" || req.method === "HEAD" ? read(req, res, next) : write(req, res, next);
}

/**
 * The fields of draft-ietf-httpapi-ratelimit-headers as it stands since its eighth version:
 * structured fields with q (quota), w (window in seconds), r (remaining) and t (seconds to reset).
 */
function tell(res: Response, name: string, { points, windowS, remaining, resetS }: Spent): void {
  res.setHeader("RateLimit-Policy", `"${name}";q=${points};w=${windowS}`);
  res.setHeader("RateLimit", `"${name}";r=${remaining};t=${resetS}`);
}

export function tooMany(seconds: number): HttpProblem {
  return new HttpProblem(429, "TOO_MANY_REQUESTS", tooManySentence(seconds), {
    "Retry-After": String(Math.ceil(seconds)),
  });
}
