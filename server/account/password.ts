import { randomBytes } from "node:crypto";

import argon2 from "argon2";

import type { Config } from "~server/config/config";

type Cost = Config["passwordCost"];

function options(cost: Cost): {
  type: 2;
  memoryCost: number;
  timeCost: number;
  parallelism: number;
} {
  return {
    type: argon2.argon2id,
    memoryCost: cost.memoryKiB,
    timeCost: cost.passes,
    parallelism: 1,
  };
}

/** Composed form first: the same password typed on another keyboard is the same password. */
function normal(password: string): string {
  return password.normalize("NFC");
}

export function hashPassword(cost: Cost, password: string): Promise<string> {
  return argon2.hash(normal(password), options(cost));
}

const decoys = new Map<string, Promise<string>>();

/**
 * Whether the password belongs to the hash. Without a hash (nobody has that address) the same
 * work is done on a decoy, so that the time to an answer says nothing.
 */
export async function passwordMatches(
  cost: Cost,
  hash: string | null,
  password: string,
): Promise<boolean> {
  if (hash !== null) return argon2.verify(hash, normal(password));
  const key = `${cost.memoryKiB}/${cost.passes}`;
  const decoy = decoys.get(key) ?? hashPassword(cost, randomBytes(16).toString("hex"));
  decoys.set(key, decoy);
  await argon2.verify(await decoy, normal(password));
  return false;
}
