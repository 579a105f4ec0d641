import type { RequestHandler } from "express";
import helmet from "helmet";

/**
 * Headers of every answer. Scripts come from this server and never from within a page; styles may
 * be inline, because React Native Web writes them so.
 */
export function securityHeaders(overTls: boolean): RequestHandler {
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'self'"],
        scriptSrc: ["'self'"],
        connectSrc: ["'self'"],
        fontSrc: ["'self'"],
        workerSrc: ["'self'"],
        manifestSrc: ["'self'"],
        styleSrc: ["'self'", "'unsafe-inline'"],
        imgSrc: ["'self'", "data:", "blob:"],
        objectSrc: ["'none'"],
        baseUri: ["'self'"],
        formAction: ["'self'"],
        frameAncestors: ["'none'"],
      },
    },
    strictTransportSecurity: overTls ? { maxAge: 31_536_000, includeSubDomains: false } : false,
    referrerPolicy: { policy: "no-referrer" },
    xFrameOptions: { action: "deny" },
  });
}
