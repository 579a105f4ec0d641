import type { OutgoingMail } from "~server/mail/outbox";
import type { Role } from "~shared/review/states";

import type { User } from "./user.entity";

type Addressee = Pick<User, "email" | "nameOnPapers">;

function mail(to: Addressee, subject: string, ...paragraphs: string[]): OutgoingMail {
  const text = [`Dear ${to.nameOnPapers},`, ...paragraphs, "Fogline"].join("\n\n");
  return { to: to.email, subject, text: `${text}\n` };
}

export function confirmMail(to: Addressee, publicUrl: string, token: string): OutgoingMail {
  return mail(
    to,
    "Confirm your address",
    `Somebody, we hope you, registered this address with Fogline under the name ${to.nameOnPapers}. To confirm it, open`,
    `${publicUrl}/account/confirm?token=${token}`,
    "The link works once and for 48 hours. If it was not you, do nothing.",
  );
}

export function alreadyRegisteredMail(to: Addressee, publicUrl: string): OutgoingMail {
  return mail(
    to,
    "You have an account already",
    "Somebody, we hope you, tried to register this address with Fogline. It has an account already, and nothing was changed. Sign in at",
    `${publicUrl}/account/sign-in`,
    `If you forgot your password, you can set a new one at ${publicUrl}/account/reset`,
  );
}

export function resetMail(to: Addressee, publicUrl: string, token: string): OutgoingMail {
  return mail(
    to,
    "Set a new password",
    "Somebody, we hope you, asked for a new password. To set it, open",
    `${publicUrl}/account/reset?token=${token}`,
    "The link works once and for one hour. If it was not you, do nothing: your password stays.",
  );
}

/** @param goOn - What to say about API tokens, which a new password doesn't end. */
export function passwordChangedMail(to: Addressee, publicUrl: string, goOn: string): OutgoingMail {
  return mail(
    to,
    "Your password was changed",
    `The password of your account was changed, and your other sessions were ended.${goOn}`,
    `If it was not you, set a new one at ${publicUrl}/account/reset`,
  );
}

export function roleMail(to: Addressee, role: Role, change: "granted" | "revoked"): OutgoingMail {
  return change === "granted"
    ? mail(to, `You are now ${role}`, `A maintainer gave your account the role ${role}.`)
    : mail(
        to,
        `You are no longer ${role}`,
        `A maintainer took the role ${role} from your account. What you did in it stays.`,
      );
}

export function newAddressMail(
  to: Pick<User, "nameOnPapers">,
  address: string,
  publicUrl: string,
  token: string,
): OutgoingMail {
  return mail(
    { email: address, nameOnPapers: to.nameOnPapers },
    "Confirm your new address",
    "Somebody, we hope you, wants this to be the mail address of their Fogline account. To confirm it, open",
    `${publicUrl}/account/address?token=${token}`,
    "The link works once and for 48 hours. If it was not you, do nothing.",
  );
}

/** To an address that was asked for by one account and belongs to another. */
export function addressTakenMail(to: Addressee, publicUrl: string): OutgoingMail {
  return mail(
    to,
    "This address has an account already",
    "Somebody, perhaps you, wanted to give this address to another Fogline account. It has an account already, and nothing was changed. Sign in to it at",
    `${publicUrl}/account/sign-in`,
    "If it was not you, do nothing.",
  );
}

export function addressChangeMail(
  to: Addressee,
  address: string,
  publicUrl: string,
  token: string,
): OutgoingMail {
  return mail(
    to,
    "A change of your address was asked for",
    `Somebody, we hope you, gave ${address} as the new address of your account. The account moves there once it is confirmed from there.`,
    `If it was not you, object here: ${publicUrl}/account/object?token=${token}`,
    "The link works for 14 days, also after the change: the account comes back to this address, every session ends, and you set a new password.",
  );
}

export function accountDeletedMail(to: Addressee): OutgoingMail {
  return mail(
    to,
    "Your account is deleted",
    "Your Fogline account is deleted, with this address and your password. What you brought to the registry stays in it, as you chose.",
    "You can register again at any time.",
  );
}
