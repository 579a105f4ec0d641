import { randomBytes } from "node:crypto";

/** Part of a table's address: twelve characters, 60 random bits, without those that are mistaken for one another. */
export function newSlug(): string {
  const alphabet = "abcdefghjkmnpqrstuvwxyz023456789";
  return [...randomBytes(12)].map((byte) => alphabet[byte % alphabet.length]).join("");
}
