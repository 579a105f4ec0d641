import type { Request, RequestHandler } from "express";

import { HttpProblem } from "~server/common/errors";

const READING = new Set(["GET", "HEAD", "OPTIONS"]);

declare module "express-serve-static-core" {
  interface Request {
    /** Whether a page of another origin asks, which then has no cookie. */
    foreign?: boolean;
  }
}

export function crossOrigin(): HttpProblem {
  return new HttpProblem(403, "CROSS_ORIGIN", "Requests from other sites change nothing here.");
}

/**
 * Refuses state-changing requests that a page of another origin makes a browser send.
 * Browsers name the page in Origin and Sec-Fetch-Site, which no page can forge; a program that
 * sends neither holds no one else's cookie. The cookie is SameSite=Lax beside this.
 *
 * A request with an API token has no authority from a cookie, and needs no origin. Other pages may
 * ask GraphQL without a cookie, as anybody may read; they are marked, and their mutations refused.
 */
export function sameOrigin(publicUrl: string): RequestHandler {
  const ours = new URL(publicUrl).origin;
  return (req, _res, next) => {
    if (READING.has(req.method) || req.bearer || isOurs(req, ours)) next();
    else if (
      req.method === "POST" &&
      req.baseUrl === "/graphql" &&
      req.get("cookie") === undefined
    ) {
      req.foreign = true;
      next();
    } else next(crossOrigin());
  };
}

function isOurs(req: Request, ours: string): boolean {
  const site = req.get("sec-fetch-site");
  if (site !== undefined && site !== "same-origin" && site !== "none") return false;
  const origin = req.get("origin");
  if (origin === undefined || origin === ours) return true;
  // Reached under another name than PUBLIC_URL's (a tunnel, a name on the local network).
  if (!URL.canParse(origin)) return false;
  const { host, protocol } = new URL(origin);
  // Where we are behind TLS, a page without it may have been written by anybody on the way.
  if (ours.startsWith("https:") && protocol !== "https:") return false;
  return host === req.get("host");
}
