import type { User } from "~server/account/user.entity";
import type { OutgoingMail } from "~server/mail/outbox";
import { SCOPE_WORDS } from "~shared/review/tokenScopes";

import type { ApiToken } from "./apiToken.entity";
import { inUtc } from "./refusals";

/** Whoever borrows a session and a password must not leave a key behind unseen. */
export function tokenMadeMail(
  to: Pick<User, "email" | "nameOnPapers">,
  { name, scopes, expiresAt }: Pick<ApiToken, "name" | "scopes" | "expiresAt">,
  publicUrl: string,
): OutgoingMail {
  const may = scopes.map((scope) => SCOPE_WORDS[scope].name.toLowerCase()).join(", ");
  return {
    to: to.email,
    subject: "An API token was made for your account",
    text: `${[
      `Dear ${to.nameOnPapers},`,
      `An API token named ${name} was made for your account. Its scopes: ${may}. It ends on ${inUtc(expiresAt)}.`,
      `If it was not you, revoke it at ${publicUrl}/account and change your password.`,
      "Fogline",
    ].join("\n\n")}\n`,
  };
}
