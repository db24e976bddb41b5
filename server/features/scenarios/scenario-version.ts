import { ProblemError } from "../../errors";

/** A version as an entity tag. */
export const entityTag = (version: number) => `"${version}"`;

/**
 * The version that a save was made from, by its If-Match header.
 *
 * @throws ProblemError 428 without the header; 412 where it names no version of ours.
 */
export function versionFrom(ifMatch: string | undefined): number {
  if (ifMatch === undefined) {
    const detail = 'Say which version you change: send its ETag back as If-Match, for example If-Match: "3".';
    throw new ProblemError({ status: 428, code: "version-required", detail });
  }
  // A proxy that compresses may have marked the tag as weak.
  const version = /^(?:W\/)?"(\d{1,9})"$/.exec(ifMatch.trim())?.[1];
  if (version !== undefined) return Number(version);
  throw new ProblemError({
    status: 412,
    code: "unknown-version",
    detail: `${ifMatch} is no version of this scenario. Read it again, then repeat your change.`,
  });
}

/** What a person is told who saved over a version they had not seen. */
export function changedMeanwhile({ version, by, at }: { version: number; by: string; at: Date }): ProblemError {
  const detail =
    `${by} saved version ${version} of this scenario at ${at.toISOString()}, after you had read it. ` +
    "Nothing of yours was stored: read it again and repeat your change, or save yours under another name.";
  return new ProblemError({ status: 412, code: "changed-meanwhile", detail, headers: { ETag: entityTag(version) } });
}
