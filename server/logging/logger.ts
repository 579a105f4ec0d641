import pino, { type Logger } from "pino";
import pinoHttp, { type HttpLogger } from "pino-http";

export type { Logger };

export function createLogger(level: string): Logger {
  return pino({ level, base: null });
}

/** An API token that was pasted where it doesn't belong, in any case. */
const TOKEN = /fgl_\w+/gi;

export function withoutTokens(text: string): string {
  return text.replace(TOKEN, "fgl_(left out)");
}

/**
 * One line a request: id, method, path, status, time. No query (links in mails carry tokens
 * there), no headers, no bodies, no addresses, no API token in a path.
 */
export function requestLog(logger: Logger): HttpLogger {
  return pinoHttp({
    logger,
    genReqId: (req) => req.id, // withRequestId has given it
    quietReqLogger: true,
    customAttributeKeys: { reqId: "id" },
    customLogLevel: (_req, res, error) => {
      if (error || res.statusCode >= 500) return "error";
      return res.statusCode >= 400 ? "warn" : "info";
    },
    serializers: {
      req: (req: { method: string; url: string }) => ({
        method: req.method,
        path: withoutTokens(req.url.split("?", 1)[0] ?? ""),
      }),
      res: (res: { statusCode: number }) => ({ status: res.statusCode }),
      err: (error: { type?: string }) => ({ type: error.type }),
    },
    customSuccessMessage: () => "request",
    customErrorMessage: () => "request",
  });
}

/** What may be written about a failure: its kind, its place in our code and what caused it. */
export function failure(error: unknown): Record<string, unknown> {
  if (!(error instanceof Error)) return { error: withoutTokens(String(error)) };
  const { code, errno } = error as { code?: unknown; errno?: unknown };
  return {
    error: error.name,
    // A driver's message quotes the row, and with it addresses and hashes.
    message: typeof errno === "number" ? String(code) : withoutTokens(error.message),
    code,
    stack: error.stack?.split("\n").filter((line) => /^\s+at /.test(line)),
  };
}
