import type { EntityManager } from "@mikro-orm/postgresql";
import { copyRow } from "./copy-text";
import { CopyWriter } from "./copy-writer";
import type { LoggedIssue } from "./issue-log";

const issueColumns = ["extract_id", "line", "column_name", "value", "severity", "rule", "reason", "remedy"];

/** Writes what was found, by COPY. */
export async function keepIssues(em: EntityManager, { extractId, issues }: { extractId: string; issues: readonly LoggedIssue[] }): Promise<void> {
  if (issues.length === 0) return;
  const writer = await CopyWriter.open(em, { table: "extract_issues", columns: issueColumns });
  for (const { line, column, value, severity, rule, reason, remedy } of issues) {
    writer.add(copyRow([extractId, String(line), column, value, severity, rule, reason, remedy]));
    await writer.flush();
  }
  await writer.end();
}

/** First and last week of the staged rows; null where there are none. */
export async function weeksStaged(em: EntityManager, { table, column }: { table: string; column: string }): Promise<{ first: string | null; last: string | null }> {
  const [row] = await em.execute<[{ first: string | null; last: string | null }]>(
    `select min(${column})::text as first, max(${column})::text as last from ${table}`,
  );
  return row;
}
