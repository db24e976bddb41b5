/** Says which row a change is made from; without a version there should be none yet. The server refuses where someone was quicker. */
export const versionHeaders = (version: string | null): Record<string, string> =>
  version === null ? { "If-None-Match": "*" } : { "If-Match": `"${version}"` };
