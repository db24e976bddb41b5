import { withoutGuard } from "@shared/csv";
import type { Header } from "../read/read-header";
import type { Finding, IssueLog } from "./issue-log";
import { columnType, type OurRecord } from "@shared/layouts";
import { rules, type RuleName } from "./rules";

type More = Pick<Finding, "reason" | "remedy">;

/** The record being checked; its columns read from it, and report to the log what they find. */
export class Row {
  line = 0;
  /** Whether an error was found in it: then it is kept out. */
  hasError = false;
  /** Our columns' values as they are read, and as they stand in the file. */
  #fields: readonly string[] = [];
  #theirs: readonly string[] | undefined;
  /** Columns whose values a layout could not read: what follows from their being empty is not reported as well. */
  #unread: ReadonlySet<string> = noColumns;
  readonly #header: Header;
  readonly #log: IssueLog;

  constructor(header: Header, log: IssueLog) {
    this.#header = header;
    this.#log = log;
  }

  begin(line: number, fields: readonly string[]): void {
    this.line = line;
    this.hasError = false;
    this.#fields = fields;
  }

  /** The same for a record that a layout has read. */
  beginRead(line: number, { values, problems }: OurRecord, theirs: readonly string[]): void {
    this.begin(line, values);
    this.#theirs = theirs;
    this.#unread = noColumns;
    for (const { column, value, reason } of problems) this.report({ column, value, rule: ruleOfUnread(column), reason });
    if (problems.length > 0) this.#unread = new Set(problems.map(({ column }) => column));
  }

  /** One of our columns; where the file lacks it, it is empty in every row. */
  column(name: string): Column {
    return new Column(this, name);
  }

  /** Where a column stands in the file. */
  position(name: string): number {
    return this.#header.positions.get(name) ?? -1;
  }

  at(position: number): string {
    return this.#fields[position]?.trim() ?? "";
  }

  /** A value as it stands in the file. */
  shown(position: number): string {
    const theirs = this.#header.theirPositions?.[position] ?? null;
    return this.#theirs && theirs !== null ? (this.#theirs[theirs]?.trim() ?? "") : this.at(position);
  }

  /** Amounts from here on cannot be kept. */
  get amountLimit(): number {
    return this.#header.amountLimit ?? mostAmount;
  }

  report(finding: { column: string; value: string; rule: RuleName } & More): void {
    if (this.#unread.has(finding.column)) return;
    if (rules[finding.rule].severity === "error") this.hasError = true;
    this.#log.report({ line: this.line, ...finding });
  }
}

const noColumns: ReadonlySet<string> = new Set();

function ruleOfUnread(column: string): RuleName {
  const type = columnType(column);
  if (type === "week" || type === "day") return "unreadable-day";
  if (type === "number" || type === "share") return "unreadable-number";
  return type === "text" ? "unreadable-code" : "unreadable-word";
}

const plainNumber = /^[+-]?(?:\d+\.?\d*|\.\d+)$/;
/** Statistics programs write large round numbers like this. */
const scientificNumber = /^[+-]?(?:\d+\.?\d*|\.\d+)[eE][+-]?\d{1,2}$/;
const amountDecimals = 4;
/** Just below what numeric(14,4) holds, so that rounding cannot lift an amount over it. */
const mostAmount = 9_999_999_999;
/** No number of a sales file has more characters; PostgreSQL refuses some that have thousands. */
const longestNumber = 40;
// eslint-disable-next-line no-control-regex -- control characters are what it looks for
const controlCharacters = /[\u0000-\u001f\u007f]/;

/**
 * Reads one column of the row at hand. Every reader answers the text that PostgreSQL takes, or null where the value is
 * empty or wrong; what is wrong is reported, and the row then counts as having an error.
 */
export class Column {
  readonly name: string;
  readonly #row: Row;
  readonly #position: number;

  constructor(row: Row, name: string) {
    this.name = name;
    this.#row = row;
    this.#position = row.position(name);
  }

  /** The value as it is read, without blanks around it. */
  get raw(): string {
    return this.#row.at(this.#position);
  }

  /** The value as it stands in the file. */
  get shown(): string {
    return this.#row.shown(this.#position);
  }

  report(rule: RuleName, more: More = {}): null {
    this.#row.report({ column: this.name, value: this.shown, rule, ...more });
    return null;
  }

  text({ longest, needed = false }: { longest: number; needed?: boolean }): string | null {
    const value = withoutGuard(this.raw);
    if (value === "") return needed ? this.report("missing-value") : null;
    if (value.length > longest) return this.report("too-long", { reason: `The value has ${value.length} characters; at most ${longest} can be kept` });
    return controlCharacters.test(value) ? this.report("control-character") : value;
  }

  /** A number below `limit` in size, with at most 3 decimals. */
  quantity({ limit }: { limit: number }): string | null {
    const value = this.number({ limit, needed: true });
    if (value !== null && hasMoreDecimals(value, 3)) return this.report("too-many-decimals");
    return value;
  }

  /** An amount of money; more than 4 decimals are rounded, with a warning. */
  amount({ needed = false, negative = false }: { needed?: boolean; negative?: boolean } = {}): string | null {
    const value = this.number({ limit: this.#row.amountLimit, needed });
    if (value === null) return null;
    if (!negative && Number(value) < 0) return this.report("negative-amount");
    if (hasMoreDecimals(value, amountDecimals)) this.report("rounded");
    return value;
  }

  /** A price; 0 is taken as not known, with a warning. */
  price(): string | null {
    const value = this.amount();
    if (value !== null && Number(value) === 0) return this.report("zero-price");
    return value;
  }

  number({ limit, needed = false }: { limit: number; needed?: boolean }): string | null {
    const value = this.raw;
    if (value === "") return needed ? this.report("missing-value") : null;
    if (value.length > longestNumber || (!plainNumber.test(value) && !scientificNumber.test(value))) return this.report("not-a-number");
    return Math.abs(Number(value)) < limit ? value : this.report("too-large");
  }

  /** PostgreSQL's text of a boolean; empty is no. */
  flag(): string {
    const value = this.raw;
    if (value === "1") return "t";
    if (value !== "0" && value !== "") this.report("not-a-flag");
    return "f";
  }

  /** A whole number of days of a week. */
  days(): string | null {
    const value = this.raw;
    if (value === "") return null;
    return /^[0-7]$/.test(value) ? value : this.report("not-days");
  }
}

/** Whether more decimals count than may: of "1.50" one does, of "1e-3" three. */
function hasMoreDecimals(value: string, most: number): boolean {
  const point = value.indexOf(".");
  // Nearly every number of a file ends here.
  if (!/e/i.test(value) && (point === -1 || value.length - point - 1 <= most)) return false;
  const [mantissa = "", exponent = "0"] = value.toLowerCase().split("e");
  const decimals = mantissa.split(".")[1]?.replace(/0+$/, "").length ?? 0;
  return decimals - Number(exponent) > most;
}
