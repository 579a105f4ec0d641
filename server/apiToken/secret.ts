import { createHash, randomBytes } from "node:crypto";

/** So that a token that leaked can be found by a search for it. */
export const TOKEN_PREFIX = "fgl_";
const SECRET_BYTES = 32;
/** No i, l, o or u: what is read aloud or typed is not mistaken. */
const ALPHABET = "0123456789abcdefghjkmnpqrstvwxyz";
/** 256 bits in fives. */
const BODY_LENGTH = Math.ceil((SECRET_BYTES * 8) / 5);
const CHECK_LENGTH = 4;
/** Characters of the secret that are kept to tell tokens apart; 236 bits stay unknown. */
const SHOWN = 4;

const FORM = new RegExp(`^${TOKEN_PREFIX}[${ALPHABET}]{${BODY_LENGTH + CHECK_LENGTH}}$`);
export const TOKEN_LENGTH = TOKEN_PREFIX.length + BODY_LENGTH + CHECK_LENGTH;

/** A new token, 256 random bits: fgl_, 52 characters of secret, 4 that check them. */
export function newSecret(): string {
  let bits = 0n;
  for (const byte of randomBytes(SECRET_BYTES)) bits = (bits << 8n) | BigInt(byte);
  let body = "";
  for (let i = 0; i < BODY_LENGTH; i += 1) {
    body = ALPHABET.charAt(Number(bits & 31n)) + body;
    bits >>= 5n;
  }
  const unchecked = TOKEN_PREFIX + body;
  return unchecked + checkOf(unchecked);
}

/** Whether a text has the form of a token and its check fits: a slip is found without a look-up. */
export function isWellFormed(text: string): boolean {
  return (
    text.length === TOKEN_LENGTH &&
    FORM.test(text) &&
    checkOf(text.slice(0, -CHECK_LENGTH)) === text.slice(-CHECK_LENGTH)
  );
}

export function hashOf(secret: string): string {
  return createHash("sha256").update(secret, "utf8").digest("hex");
}

export function startOf(secret: string): string {
  return secret.slice(0, TOKEN_PREFIX.length + SHOWN);
}

/** Checks for slips only; the secret is what keeps strangers out. */
function checkOf(unchecked: string): string {
  const digest = createHash("sha256").update(`check of ${unchecked}`, "utf8").digest();
  return [...digest.subarray(0, CHECK_LENGTH)].map((byte) => ALPHABET.charAt(byte & 31)).join("");
}
