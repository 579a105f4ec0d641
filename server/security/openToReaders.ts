import cors from "cors";
import type { RequestHandler } from "express";

/** What a page of another origin may read of an answer, beside what every page may. */
const EXPOSED = [
  "ETag",
  "Content-Location",
  "Content-Disposition",
  "RateLimit",
  "RateLimit-Policy",
  "Retry-After",
  "WWW-Authenticate",
  "X-Request-Id",
];
const DAY_S = 86_400;

const forReading = cors({
  origin: "*",
  methods: ["GET", "HEAD"],
  allowedHeaders: ["Accept", "Authorization", "If-None-Match"],
  exposedHeaders: EXPOSED,
  maxAge: DAY_S,
});
const forAsking = cors({
  origin: "*",
  methods: ["POST"],
  allowedHeaders: ["Accept", "Authorization", "Content-Type"],
  exposedHeaders: EXPOSED,
  maxAge: DAY_S,
});

/**
 * Lets pages of any origin read what anybody may: downloads, and GraphQL, by API token or by
 * nobody. Never with credentials: browsers then neither send our cookie nor show an answer that
 * one was sent for, and an answer to a cookie carries no permission at all.
 */
export const openToReaders: RequestHandler = (req, res, next) => {
  if (req.get("cookie") !== undefined && req.get("authorization") === undefined) next();
  else if (req.baseUrl === "/graphql") forAsking(req, res, next);
  else if (["GET", "HEAD", "OPTIONS"].includes(req.method)) forReading(req, res, next);
  else next();
};
