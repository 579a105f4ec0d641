import { existsSync } from "node:fs";
import path from "node:path";

import type { Express, Request, RequestHandler } from "express";
import expressStaticGzip from "express-static-gzip";

import { HttpProblem } from "~server/common/errors";

/** Names in these folders carry a digest of their content, so they can be kept for ever. */
const HASHED = /^\/(_expo\/static|assets)\//;
/** Pages behind a mailed link: no search engine should keep their addresses. */
const MAILED = /^\/(check|report)\//;
/** Below these nothing is a page of the client. */
const NO_PAGES = ["/api", "/graphql", "/_expo", "/assets", "/fonts", "/workers"];

export function hasWebExport(webRoot: string): boolean {
  return existsSync(path.resolve(webRoot, "index.html"));
}

/** Serves the exported client: files as they are, and its one page for every address of its own. */
export function serveWebClient(app: Express, webRoot: string): void {
  const root = path.resolve(webRoot);
  app.use(
    expressStaticGzip(root, {
      enableBrotli: true,
      orderPreference: ["br", "gz"],
      index: false,
      serveStatic: {
        setHeaders: (res) => {
          // originalUrl: req.url has become the compressed file's by now.
          const { originalUrl } = res.req as Request;
          const hashed = HASHED.test(originalUrl.split("?", 1)[0] ?? "");
          res.setHeader(
            "Cache-Control",
            hashed ? "public, max-age=31536000, immutable" : "no-cache",
          );
        },
      },
    }),
  );
  for (const folder of NO_PAGES) app.use(folder, nothingHere);
  app.get("/{*path}", (req, res, next) => {
    // A missing file is missing; answering it with the page would only hide that.
    if (path.extname(req.path) !== "" && !req.accepts("html")) return nothingHere(req, res, next);
    res.setHeader("Cache-Control", "no-cache");
    if (MAILED.test(req.path)) res.setHeader("X-Robots-Tag", "noindex, nofollow");
    res.sendFile("index.html", { root }, (error) => {
      if (error) next(error);
    });
  });
  app.use(nothingHere);
}

const nothingHere: RequestHandler = (_req, _res, next) => {
  next(new HttpProblem(404, "NOT_FOUND", "There is nothing at this address."));
};
