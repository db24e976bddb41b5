import type { ExtractChanges } from "@shared/contract/extracts";
import type { MergeCounts } from "../../catalogue";

/** What a catalogue file changes: such files have no weeks, and a row they lack stays as it is. */
export const withoutWeeks = (counts: MergeCounts): ExtractChanges => ({ totals: { ...counts, missing: 0 }, weeks: [], secondLook: [] });
