import type { ExtractChanges } from "@shared/contract/extracts";
import { countOf } from "@/lib/format/number";

/** What a load does, in a sentence: "1,248 new rows, 12 changed, 36 already there as they are." */
export const changesSentence = ({ totals }: ExtractChanges, isLoaded: boolean): string => {
  const parts = [
    totals.new > 0 && countOf(totals.new, "new row"),
    totals.changed > 0 && `${countOf(totals.changed, "row")} changed`,
    totals.same > 0 && `${countOf(totals.same, "row")} already there as they are`,
  ].filter(Boolean);
  if (parts.length === 0) return isLoaded ? "It changed nothing." : "Loading it would change nothing.";
  return `${parts.join(", ")}.`;
};
