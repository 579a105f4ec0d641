import { isEmail } from "class-validator";

import { refuse, type Refusal } from "~server/common/outcomes";

export const PASSWORD_MIN = 12;
export const PASSWORD_MAX = 128;
const EMAIL_MAX = 254;
const NAME_MAX = 120;
const FURTHER_NAMES_MAX = 10;

/** The form an address is kept and looked up in. */
export function normalEmail(email: string): string {
  return email.trim().toLowerCase();
}

export function emailProblem(email: string): Refusal | null {
  // ASCII only: what looks alike in another script would be another account, and the length is
  // checked first because the pattern below is no match for a megabyte.
  const fits =
    email.length <= EMAIL_MAX &&
    /^[\x21-\x7e]+$/.test(email) &&
    isEmail(email, { allow_utf8_local_part: false });
  return fits ? null : refuse("EMAIL_INVALID", "That is not a mail address.", "email");
}

export function nameProblem(name: string, field = "nameOnPapers"): Refusal | null {
  if (name === "") return refuse("NAME_MISSING", "Give your name as on papers.", field);
  if (name.length > NAME_MAX) {
    return refuse("NAME_TOO_LONG", `A name has at most ${NAME_MAX} characters.`, field);
  }
  if (/[\u0000-\u001f\u007f<>]/.test(name)) {
    return refuse("NAME_INVALID", "A name has no line breaks and no angle brackets.", field);
  }
  return null;
}

/** Further names in one spelling, each once and without the name as on papers itself. */
export function furtherNamesOf(names: readonly string[], nameOnPapers: string): string[] {
  const normal = names.map(normalName).filter((name) => name !== "" && name !== nameOnPapers);
  return [...new Set(normal)];
}

export function furtherNamesProblem(names: readonly string[]): Refusal | null {
  if (names.length > FURTHER_NAMES_MAX) {
    const message = `Give at most ${FURTHER_NAMES_MAX} further names.`;
    return refuse("TOO_MANY_NAMES", message, "furtherNames");
  }
  for (const name of names) {
    const problem = nameProblem(name, "furtherNames");
    if (problem) return problem;
  }
  return null;
}

/** One line, without space around it and in composed form. */
export function normalName(name: string): string {
  return name
    .normalize("NFC")
    .replace(/[ \t\u00a0]+/g, " ")
    .trim();
}

/**
 * Length is what makes a password; the address is the first thing anybody tries.
 *
 * @param field - Name of the argument it came in.
 */
export function passwordProblem(password: string, email: string, field: string): Refusal | null {
  const length = [...password].length;
  if (length < PASSWORD_MIN) {
    return refuse("PASSWORD_SHORT", `A password has at least ${PASSWORD_MIN} characters.`, field);
  }
  if (length > PASSWORD_MAX) {
    return refuse("PASSWORD_LONG", `A password has at most ${PASSWORD_MAX} characters.`, field);
  }
  const plain = password.trim().toLowerCase();
  if (plain === email || plain === email.split("@")[0]) {
    return refuse("PASSWORD_IS_ADDRESS", "Your mail address can't be your password.", field);
  }
  return null;
}
