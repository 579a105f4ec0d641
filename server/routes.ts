import type { Request, Response, Router } from "express";
import type { DataSource } from "typeorm";

import type { RequestContext } from "~server/common/context";
import type { Config } from "~server/config/config";
import { constraintDownloads } from "~server/download/constraint.routes";
import { evidenceRoutes } from "~server/evidence/evidence.routes";
import { logDownloads } from "~server/download/log.routes";
import { releaseDownloads } from "~server/download/release.routes";
import { tableDownloads } from "~server/download/table.routes";
import type { RateLimits } from "~server/security/rateLimits";
import { uploadRoutes } from "~server/upload/upload.routes";

/** What a plain HTTP address may use beside its request. */
export interface RouteParts {
  config: Config;
  database: DataSource;
  limits: RateLimits;
  /** Who asks, as resolvers see it. */
  context(req: Request, res: Response): Promise<RequestContext>;
}

export type RouteInstaller = (router: Router, parts: RouteParts) => void;

/**
 * Addresses beside GraphQL, all under /api: an installer adds its own with its full path
 * ("/api/uploads"). Sessions, the same-origin check and the general limits are in front of it;
 * throw an HttpProblem for an answer in words.
 */
export const routes: RouteInstaller[] = [
  uploadRoutes,
  constraintDownloads,
  tableDownloads,
  releaseDownloads,
  logDownloads,
  evidenceRoutes,
];
