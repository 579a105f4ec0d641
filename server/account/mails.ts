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

export function passwordChangedMail(to: Addressee, publicUrl: string): OutgoingMail {
  return mail(
    to,
    "Your password was changed",
    "The password of your account was changed, and your other sessions were ended.",
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
