import type { ErrorRequestHandler, Request, Response } from "express";

import { HttpProblem } from "~server/common/errors";
import { failure, type Logger } from "~server/logging/logger";

import { requestId } from "./requestId";

const INTERNAL =
  "The server could not complete this. Try again; if it stays, quote the request id.";

/** Faults of a request that Express and its parsers find before any code of ours runs. */
const PARSER_PROBLEMS: Record<string, HttpProblem> = {
  "entity.too.large": new HttpProblem(413, "TOO_LARGE", "That is too large to be taken."),
  "entity.parse.failed": new HttpProblem(400, "BAD_REQUEST", "The body is not valid JSON."),
  "entity.verify.failed": new HttpProblem(400, "BAD_REQUEST", "The body can't be read."),
  "request.aborted": new HttpProblem(400, "BAD_REQUEST", "The request was broken off."),
  "request.size.invalid": new HttpProblem(
    400,
    "BAD_REQUEST",
    "The body is not as long as announced.",
  ),
  "stream.encoding.set": new HttpProblem(400, "BAD_REQUEST", "The body can't be read."),
  "encoding.unsupported": new HttpProblem(415, "BAD_REQUEST", "That encoding is not supported."),
  "charset.unsupported": new HttpProblem(415, "BAD_REQUEST", "Send the body as UTF-8."),
};

/** Answers in the form of the address: GraphQL's list of errors, or one flat object. */
function sendProblem(req: Request, res: Response, problem: HttpProblem): void {
  const { code, message } = problem;
  const graphql = req.originalUrl.split("?", 1)[0] === "/graphql";
  res
    .status(problem.status)
    .set(problem.headers)
    .json(
      graphql
        ? { errors: [{ message, extensions: { code, requestId: requestId() } }] }
        : { code, message, requestId: requestId() },
    );
}

/** Last in the chain: words for what was expected, INTERNAL and a line in the log for the rest. */
export function errorHandler(logger: Logger): ErrorRequestHandler {
  return (error: unknown, req, res, next) => {
    if (res.headersSent) {
      next(error);
      return;
    }
    const problem = asProblem(error);
    if (problem.status >= 500) {
      logger.error({ id: requestId(), ...failure(error) }, "request failed");
    }
    sendProblem(req, res, problem);
  };
}

function asProblem(error: unknown): HttpProblem {
  if (error instanceof HttpProblem) return error;
  const { type, status } = (error ?? {}) as { type?: unknown; status?: unknown };
  const known = typeof type === "string" ? PARSER_PROBLEMS[type] : undefined;
  if (known) return known;
  // A path that can't be decoded, a range that can't be served: the library's status, our words.
  if (typeof status === "number" && status >= 400 && status < 500) {
    return new HttpProblem(status, "BAD_REQUEST", "The request can't be understood.");
  }
  return new HttpProblem(500, "INTERNAL", INTERNAL);
}
