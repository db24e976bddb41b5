import type { IssueCount } from "@shared/contract/extracts";
import { rules, type Rule, type RuleName } from "./rules";

/** What one row broke. */
export type Finding = {
  line: number;
  /** Empty where it is about the whole row. */
  column: string;
  value: string;
  rule: RuleName;
  /** Says more than the rule does by itself. */
  reason?: string;
  remedy?: string;
};

/** A finding as it is kept. */
export type LoggedIssue = Required<Finding> & { severity: Rule["severity"] };

/** Issues kept of one file; what is beyond is only counted. */
export const mostIssuesKept = 100_000;
/** Of each rule so many are kept even then, so that a flood of one does not hide another. */
const alwaysKeptOfARule = 1_000;

export const longestValue = 200;
const longestText = 400;

/** Collects what is wrong with the rows of a file: counts are exact, the issues themselves are kept up to a bound. */
export class IssueLog {
  readonly kept: LoggedIssue[] = [];
  readonly #counts = new Map<RuleName, number>();
  readonly #listed = new Map<RuleName, number>();
  #columnNames: ReadonlyMap<string, string> = new Map();

  /** Says what columns of ours are called in the file, where that is something else. */
  nameColumns(names: ReadonlyMap<string, string>): void {
    this.#columnNames = names;
  }

  /** A column of ours as issues name it: with the file's own name before ours, where it has another. */
  columnName(column: string): string {
    return this.#columnNames.get(column) ?? column;
  }

  report(finding: Finding): void {
    const count = this.count(finding.rule, 1);
    if (this.kept.length >= mostIssuesKept && count > alwaysKeptOfARule) return;
    const rule = rules[finding.rule];
    this.list(finding.rule, 1);
    this.kept.push({
      line: finding.line,
      column: cut(this.columnName(finding.column), 80),
      value: cut(finding.value, longestValue),
      rule: finding.rule,
      severity: rule.severity,
      reason: cut(finding.reason ?? rule.reason, longestText),
      remedy: cut(finding.remedy ?? rule.remedy, longestText),
    });
  }

  /** Counts what was found by other means; answers the new count of the rule. */
  count(rule: RuleName, more: number): number {
    const count = (this.#counts.get(rule) ?? 0) + more;
    if (count > 0) this.#counts.set(rule, count);
    return count;
  }

  /** Notes that so many issues of a rule were written by other means. */
  list(rule: RuleName, more: number): void {
    this.#listed.set(rule, (this.#listed.get(rule) ?? 0) + more);
  }

  /** How many more of a rule may be kept. */
  room(rule: RuleName): number {
    return Math.max(0, mostIssuesKept - this.kept.length, alwaysKeptOfARule - (this.#counts.get(rule) ?? 0));
  }

  total(severity: Rule["severity"]): number {
    return this.byRule().reduce((sum, entry) => (entry.severity === severity ? sum + entry.count : sum), 0);
  }

  /** Counts by rule, errors first, then the most frequent. */
  byRule(): IssueCount[] {
    const counts = [...this.#counts].map(([rule, count]) => {
      const { severity, reason, remedy } = rules[rule];
      return { rule, severity, reason, remedy, count, listed: this.#listed.get(rule) ?? 0 };
    });
    return counts.sort((a, b) => a.severity.localeCompare(b.severity) || b.count - a.count || a.rule.localeCompare(b.rule));
  }
}

/** At most so many characters, what PostgreSQL cannot keep in text (NUL, halves of pairs) made visible. */
function cut(text: string, length: number): string {
  return text.slice(0, length).replaceAll("\0", "\u2400").toWellFormed();
}
