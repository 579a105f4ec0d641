import "reflect-metadata";

import { expressMiddleware } from "@as-integrations/express5";
import compression from "compression";
import express, { Router, type Express, type RequestHandler } from "express";
import type { DataSource } from "typeorm";

import { bearer } from "~server/apiToken/bearer";
import { HttpProblem } from "~server/common/errors";
import type { Config } from "~server/config/config";
import { isReady } from "~server/database/prepare";
import { buildContext } from "~server/http/context";
import { errorHandler } from "~server/http/errors";
import { startApollo } from "~server/http/graphql";
import { withRequestId } from "~server/http/requestId";
import { createSessions } from "~server/http/session";
import { createLogger, requestLog, type Logger } from "~server/logging/logger";
import { routes, type RouteParts } from "~server/routes";
import { createSchema } from "~server/schema";
import { securityHeaders } from "~server/security/headers";
import { createRateLimits } from "~server/security/rateLimits";
import { openToReaders } from "~server/security/openToReaders";
import { limitByMethod, limitTo } from "~server/security/limitTo";
import { sameOrigin } from "~server/security/sameOrigin";
import { serveWebClient } from "~server/static/webClient";

/** Largest GraphQL request. Pasted BibTeX is the longest thing anybody sends in one. */
const GRAPHQL_BODY = "256kb";

export interface App {
  app: Express;
  /** Ends what the application opened itself; the data source stays the caller's. */
  close(): Promise<void>;
}

/** Builds the HTTP application over a data source that is initialized and migrated. */
export async function buildApp(
  config: Config,
  dataSource: DataSource,
  logger: Logger = createLogger(config.logLevel),
): Promise<App> {
  const schema = await createSchema();
  const apollo = await startApollo(schema, logger);
  const sessions = await createSessions(config, dataSource);
  const limits = createRateLimits(config);
  const parts: RouteParts = {
    config,
    database: dataSource,
    limits,
    context: (req, res) => buildContext({ config, database: dataSource, limits }, req, res),
  };

  const app = express();
  app.disable("x-powered-by");
  app.set("trust proxy", config.trustProxy);
  app.set("query parser", "simple");

  app.use(withRequestId, requestLog(logger));
  app.use(securityHeaders(config.publicUrl.startsWith("https:")));

  app.get("/healthz", (_req, res) => {
    res.setHeader("Cache-Control", "no-store");
    res.json({ status: "up" });
  });
  app.get("/readyz", async (_req, res) => {
    const ready = await isReady(dataSource);
    res.setHeader("Cache-Control", "no-store");
    res.status(ready ? 200 : 503).json({ status: ready ? "ready" : "not ready" });
  });

  app.use(compression());
  app.use(
    ["/graphql", "/api"],
    noStore,
    openToReaders,
    bearer(dataSource, limits),
    sameOrigin(config.publicUrl),
  );

  app.post(
    "/graphql",
    limitTo(limits.graphql, "graphql"),
    express.json({ limit: GRAPHQL_BODY }),
    sessions.middleware,
    withBody,
    expressMiddleware(apollo, { context: ({ req, res }) => parts.context(req, res) }),
  );
  app.all("/graphql", (_req, _res, next) => {
    const sentence = "Send GraphQL by POST, as JSON.";
    next(new HttpProblem(405, "METHOD_NOT_ALLOWED", sentence, { Allow: "POST" }));
  });

  app.use("/api", limitByMethod(limits.download, limits.upload), sessions.middleware);
  const api = Router();
  for (const install of routes) install(api, parts);
  app.use(api);

  serveWebClient(app, config.webRoot);
  app.use(errorHandler(logger));

  return {
    app,
    close: async () => {
      await apollo.stop();
      await sessions.close();
      await limits.close();
    },
  };
}

/** Answers about persons are nobody else's; a download that may be kept says so itself. */
const noStore: RequestHandler = (_req, res, next) => {
  res.setHeader("Cache-Control", "no-store");
  next();
};

/** Apollo wants a body to look at, and says itself what is wrong with an empty one. */
const withBody: RequestHandler = (req, _res, next) => {
  req.body ??= {};
  next();
};
