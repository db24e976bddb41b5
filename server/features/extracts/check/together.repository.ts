import { exists } from "../../../database/exists";
import type { KindDefinition, StagedRows } from "../kinds/kind";
import type { CheckNotes } from "./check-notes";
import { longestValue, type IssueLog } from "./issue-log";
import { rules, type RuleName } from "./rules";

/*
 * Rules over several rows of a file, checked in sets on the staged rows. Table and column names are ours; nothing from
 * a file becomes part of a statement.
 */

export type Together = StagedRows & { extractId: string; log: IssueLog; /** Whether to write issues; counts are kept anyway. */ keep: boolean };

type Breach = Together & {
  rule: RuleName;
  column: string;
  /** SQL of the value shown, over `staged` and `broken`. */
  value: string;
  /** SQL of the reason, over `broken`. */
  reason: string;
  /** Temporary table with the lines that break the rule, as `line`. */
  lines: string;
};

/** Writes an issue for each of the lines, counts them, and removes them from the staged rows. */
export async function removeBreaches({ em, table, extractId, log, keep, rule, column, value, reason, lines }: Breach): Promise<void> {
  const { severity, remedy } = rules[rule];
  const room = keep ? log.room(rule) : 0;
  await em.execute(
    `insert into extract_issues (extract_id, line, column_name, value, severity, rule, reason, remedy)
     select ?, broken.line, ?, left(${value}, ${longestValue}), ?, ?, ${reason}, ?
     from ${lines} broken join ${table} staged on staged.line = broken.line order by broken.line limit ${room}`,
    [extractId, column === "" ? "" : log.columnName(column), severity, rule, remedy],
  );
  const [{ count }] = await em.execute<[{ count: number }]>(`select count(*)::int as count from ${lines}`);
  log.count(rule, count);
  log.list(rule, Math.min(count, room));
  await em.execute(`delete from ${table} staged using ${lines} broken where staged.line = broken.line`);
}

/**
 * Rows with the same key: where they say the same the first is taken, with a warning for the others; where they
 * contradict each other none can be trusted, and all are errors.
 */
export async function rejectRepeatedRows({ definition, notes, ...together }: Together & { definition: KindDefinition; notes: CheckNotes }): Promise<void> {
  if (!notes.mayRepeat) return;
  const { em, table } = together;
  const { key, keyText, staged } = definition;
  const keyColumns = key.join(", ");
  await em.execute(`
    create temporary table repeated_keys on commit drop as
    select ${keyColumns}, min(line) as first_line from ${table} group by ${keyColumns} having count(*) > 1`);
  if (await exists(em, "select from repeated_keys")) {
    const everything = staged.map(({ name }) => `staged.${name}`).join(", ");
    const sameKey = key.map((column) => `staged.${column} = repeated.${column}`).join(" and ");
    await em.execute(`
      create temporary table repeated_rows on commit drop as
      select staged.line, repeated.first_line,
        bool_or((${everything}) is distinct from (${everything.replaceAll("staged.", "first.")})) over (partition by repeated.first_line) as contradicts
      from ${table} staged join repeated_keys repeated on ${sameKey} join ${table} first on first.line = repeated.first_line`);
    await em.execute("create temporary table contradicting_lines on commit drop as select line, first_line from repeated_rows where contradicts");
    await em.execute(`
      create temporary table repeated_lines on commit drop as
      select line, first_line from repeated_rows where not contradicts and line > first_line`);
    const shown = { ...together, column: "", value: keyText };
    await removeBreaches({
      ...shown, rule: "contradicting-rows", lines: "contradicting_lines",
      reason: "'Another row for the same differs from this one; the first such is in line ' || broken.first_line",
    });
    await removeBreaches({ ...shown, rule: "repeated-row", lines: "repeated_lines", reason: "'The same row stands in line ' || broken.first_line" });
  }
  await em.execute("drop table if exists repeated_lines, contradicting_lines, repeated_rows, repeated_keys");
}

/** What describes a product must be the same in each of its rows; rows that differ from its first are errors. */
export async function rejectContradictingProducts(together: Together): Promise<void> {
  const { em, table } = together;
  const described = ["name", "gtin", "brand", "category", "sold_by_weight"];
  const of = (alias: string) => `(${described.map((column) => `${alias}.${column}`).join(", ")})`;
  await em.execute(`
    create temporary table contradicting_lines on commit drop as
    select staged.line, first.line as first_line
    from ${table} staged
    join (select distinct on (code) * from ${table} order by code, line) first on first.code = staged.code
    where ${of("staged")} is distinct from ${of("first")}`);
  await removeBreaches({
    ...together, rule: "contradicting-rows", column: "product", value: "staged.code", lines: "contradicting_lines",
    reason: "'Name, GTIN, brand, category or sold_by_weight differ from this product''s first row, in line ' || broken.first_line",
  });
  await em.execute("drop table contradicting_lines");
}
