import { hash, verify } from "@node-rs/argon2";

/**
 * argon2id by the second choice of RFC 9106, section 4 (64 MiB, 3 passes, 4 lanes): a guess costs an attacker 64 MiB,
 * a sign-in costs us about a tenth of a second, and since the runtime computes at most four at once, a burst of
 * sign-ins takes at most 256 MiB. The text of each hash names its own parameters, so they can be raised later.
 */
const parameters = { memoryCost: 65_536, timeCost: 3, parallelism: 4 };

/** Stands in for the hash of a person who does not exist, so that the answer takes as long. */
const nobodysHash = hash("no person has this password", parameters);

/** Hashes a password for keeping (argon2id, salted; the parameters are part of the text). */
export function hashPassword(password: string): Promise<string> {
  return hash(password.normalize("NFKC"), parameters);
}

/** Whether a password fits a hash; without a hash it answers false after the same work. */
export async function passwordFits(password: string, passwordHash: string | undefined): Promise<boolean> {
  const fits = await verify(passwordHash ?? (await nobodysHash), password.normalize("NFKC"));
  return fits && passwordHash !== undefined;
}
