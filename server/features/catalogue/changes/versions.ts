import { createHash } from "node:crypto";
import { ProblemError } from "../../../errors";
import type { Seen } from "./author";

const versionLength = 16;

/** Stands for a row's content: the same content has the same version, whoever wrote it and when. */
export function versionOf(content: Record<string, unknown>): string {
  return createHash("sha256").update(JSON.stringify(content)).digest("base64url").slice(0, versionLength);
}

/** A version as an entity tag. */
export const entityTag = (version: string) => `"${version}"`;

type Standing = {
  seen: Seen;
  /** Of the row as it is; null where there is none. */
  version: string | null;
  /** What it is, for the sentence: "store S1". */
  what: string;
  lastChange: () => Promise<{ name: string; at: Date } | null>;
};

/**
 * Refuses a change by someone who has not seen the row as it is. Who says nothing of what they saw overwrites.
 *
 * @throws ProblemError 412 that says who changed it, and when.
 */
export async function requireSeen({ seen, version, what, lastChange }: Standing): Promise<void> {
  if (isSeen(seen, version)) return;
  if (version === null) throw changed(`Someone removed ${what} meanwhile. Nothing of yours was stored.`);
  const last = await lastChange();
  const whose = last === null ? "Someone" : last.name;
  const when = last === null ? "meanwhile" : `at ${last.at.toISOString()}`;
  const ends = "Nothing of yours was stored: read it again, then repeat your change.";
  if (seen.ifNoneMatch !== undefined) throw changed(`${whose} entered ${what} ${when}. ${ends}`);
  throw changed(`${whose} changed ${what} ${when}, after you had read it. ${ends}`);
}

function isSeen({ ifMatch, ifNoneMatch }: Seen, version: string | null): boolean {
  if (ifNoneMatch !== undefined && ifNoneMatch.trim() === "*" && version !== null) return false;
  if (ifMatch === undefined) return true;
  if (ifMatch.trim() === "*") return version !== null;
  // A proxy that compresses may have marked a tag as weak.
  const tags = ifMatch.split(",").map((tag) => tag.trim().replace(/^W\//, ""));
  return version !== null && tags.includes(entityTag(version));
}

const changed = (detail: string) => new ProblemError({ status: 412, code: "changed-meanwhile", detail });
