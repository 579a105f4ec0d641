/** What a program is told when its token opens nothing: the same words over GraphQL and plain HTTP. */
import { HttpProblem } from "~server/common/errors";
import type { TokenScope } from "~shared/review/tokenScopes";

const REALM = 'Bearer realm="Fogline"';
/** For an answer to somebody without a token. */
export const BEARER_CHALLENGE = { "WWW-Authenticate": REALM };

/** RFC 6750, whose descriptions hold no quotation marks and nothing beyond ASCII. */
function challenge(error: string, sentence: string, scope?: TokenScope): Record<string, string> {
  const description = sentence.replace(/[“”"\\]/g, "'").replace(/[^\x20-\x7e]/g, "-");
  const wanted = scope === undefined ? "" : `, scope="${scope}"`;
  return {
    "WWW-Authenticate": `${REALM}, error="${error}", error_description="${description}"${wanted}`,
  };
}

function invalid(code: string, sentence: string): HttpProblem {
  return new HttpProblem(401, code, sentence, challenge("invalid_token", sentence));
}

/** "3 March 2026 at 10:04 UTC" */
export function inUtc(at: Date): string {
  const day = at.toLocaleDateString("en-GB", {
    day: "numeric",
    month: "long",
    year: "numeric",
    timeZone: "UTC",
  });
  return `${day} at ${at.toISOString().slice(11, 16)} UTC`;
}

export function malformed(): HttpProblem {
  return invalid(
    "TOKEN_MALFORMED",
    "This is no API token of Fogline, or one that was cut off or mistyped. Send “Authorization: Bearer”, a space and the whole token, which begins with fgl_.",
  );
}

export function unknown(): HttpProblem {
  return invalid("TOKEN_UNKNOWN", "Nobody here has this API token. Make one on your account page.");
}

export function expired(at: Date): HttpProblem {
  return invalid(
    "TOKEN_EXPIRED",
    `This API token expired on ${inUtc(at)}. Make a new one on your account page.`,
  );
}

export function revoked(at: Date): HttpProblem {
  return invalid(
    "TOKEN_REVOKED",
    `This API token was revoked on ${inUtc(at)}. Make a new one on your account page.`,
  );
}

export function withoutScope(scope: TokenScope): HttpProblem {
  const sentence = `This API token lacks the scope “${scope}”, which this needs. Make one that has it on your account page.`;
  return new HttpProblem(
    403,
    "TOKEN_SCOPE",
    sentence,
    challenge("insufficient_scope", sentence, scope),
  );
}

export function closedToTokens(): HttpProblem {
  const sentence =
    "API tokens can't do this, whatever their scopes: the desk and the account are for people who are signed in on the website.";
  return new HttpProblem(403, "TOKEN_CLOSED", sentence, challenge("insufficient_scope", sentence));
}
