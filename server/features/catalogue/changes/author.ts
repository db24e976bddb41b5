/** Who changes the catalogue, and by which file where one brings the change. */
export type Author = {
  personId: string;
  tokenId?: string | null;
  requestId?: string | null;
  file?: { id: string; name: string };
};

/** What a request says of the row it changes: the version its caller has seen, or that there should be none. */
export type Seen = { ifMatch?: string; ifNoneMatch?: string };

/** Who writes, and what they had seen before. */
export type Write = { by: Author; seen: Seen };
