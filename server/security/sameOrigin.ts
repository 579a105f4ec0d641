import type { Request, RequestHandler } from "express";

import { HttpProblem } from "~server/common/errors";

const READING = new Set(["GET", "HEAD", "OPTIONS"]);

/**
 * Refuses state-changing requests that a page of another origin makes a browser send.
 * Browsers name the page in Origin and Sec-Fetch-Site, which no page can forge; a program that
 * sends neither holds no one else's cookie. The cookie is SameSite=Lax beside this.
 */
export function sameOrigin(publicUrl: string): RequestHandler {
  const ours = new URL(publicUrl).origin;
  return (req, _res, next) => {
    if (READING.has(req.method) || isOurs(req, ours)) next();
    else
      next(new HttpProblem(403, "CROSS_ORIGIN", "Requests from other sites change nothing here."));
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
