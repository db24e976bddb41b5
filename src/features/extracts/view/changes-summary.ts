import type { ExtractChanges } from "@shared/contract/extracts";
import { capitalised } from "@/lib/format/capitalised";
import { countOf } from "@/lib/format/number";

/** Whether a load would leave everything as it is. */
export const changesNothing = ({ totals }: Pick<ExtractChanges, "totals">): boolean => totals.new + totals.changed === 0;

/** What a load does, in a sentence: "1,248 new rows, 12 changed, 36 already there as they are." */
export const changesSentence = ({ totals }: Pick<ExtractChanges, "totals">, isLoaded: boolean): string => {
  if (changesNothing({ totals })) {
    return isLoaded ? "It changed nothing: every row was there already." : "Nothing would change: every row is there already.";
  }
  const parts = [
    totals.new > 0 && countOf(totals.new, "new row"),
    totals.changed > 0 && `${countOf(totals.changed, "row")} changed`,
    totals.same > 0 && `${countOf(totals.same, "row")} already there as ${totals.same === 1 ? "it is" : "they are"}`,
  ].filter(Boolean);
  return `${parts.join(", ")}.${missingSentence(totals.missing, isLoaded)}`;
};

const missingSentence = (missing: number, isLoaded: boolean): string => {
  if (missing === 0) return "";
  const rows = `${countOf(missing, "row")} of these weeks and stores`;
  return isLoaded ? ` ${rows} were not in the file and stayed.` : ` ${rows} are loaded but not in the file: they stay.`;
};

/** What a withdrawal puts back, as far as it is known. */
export const withdrawalSentence = (changes: Pick<ExtractChanges, "totals"> | undefined): string => {
  if (!changes) return "What its rows replaced is put back, and rows it added are taken out.";
  const { totals } = changes;
  const parts = [
    totals.new > 0 && `the ${countOf(totals.new, "row")} it added ${totals.new === 1 ? "is" : "are"} taken out`,
    totals.changed > 0 && `the ${countOf(totals.changed, "row")} it changed ${totals.changed === 1 ? "gets" : "get"} back what stood there before`,
  ].filter((part) => part !== false);
  if (parts.length === 0) return "It changed nothing, so nothing goes back; it is only marked as withdrawn.";
  return `${capitalised(parts.join(", and "))}.`;
};
