import type { ExtractKind } from "@shared/contract/extract-kinds";
import { detectLayout } from "@shared/layouts";
import { kindNames } from "./extract-state";

const kinds = Object.keys(kindNames) as ExtractKind[];

/** A header that fits a kind this well says more than the file's name. */
const sure = 0.75;

/** What a file most likely holds, by its own columns; null where they do not tell. */
export const kindFromHead = (head: Uint8Array): ExtractKind | null => {
  const fits = kinds.map((kind) => ({ kind, fit: detectLayout(head, kind).confidence.mapping }));
  const [best, second] = fits.sort((one, other) => other.fit - one.fit);
  return best.fit >= sure && best.fit > second.fit ? best.kind : null;
};
