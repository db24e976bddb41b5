import { hash, verify } from "@node-rs/argon2";

/**
 * argon2id with 46 MiB, one pass and one lane: the first of the equivalent settings that OWASP's Password Storage Cheat
 * Sheet gives (2023). A guess costs an attacker 46 MiB, a sign-in costs us about 50 ms of one core, and since the
 * runtime computes at most four at once, a burst of sign-ins takes at most 184 MiB. The text of each hash names its own
 * parameters, so they can be raised later.
 */
const parameters = { memoryCost: 47_104, timeCost: 1, parallelism: 1 };

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
