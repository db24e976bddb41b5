import type { CheckNotes } from "./check-notes";
import { keepIssues } from "./check.repository";
import type { IssueLog } from "./issue-log";
import { reportMissingWeeks } from "./missing-weeks.repository";
import { reportUnlisted } from "./outside-listing.repository";
import { reportUnusualPrices } from "./unusual-prices.repository";
import type { StagedRows } from "../kinds/kind";

export type SalesTogether = StagedRows & { extractId: string; log: IssueLog; notes: CheckNotes };

/** What the rows of a sales file say together, and with what is there already. All of it is warned about; no row is taken out. */
export async function checkSalesTogether({ keep, ...together }: SalesTogether & { keep: boolean }): Promise<void> {
  if (!keep) return;
  const { em, extractId, log } = together;
  const keptBefore = log.kept.length;
  await reportUnusualPrices(together);
  await reportUnlisted(together);
  await reportMissingWeeks(together);
  await keepIssues(em, { extractId, issues: log.kept.slice(keptBefore) });
}
