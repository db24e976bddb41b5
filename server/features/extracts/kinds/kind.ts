import type { EntityManager } from "@mikro-orm/postgresql";
import type { ChainCalendar, Day } from "@shared/calendar";
import type { ExtractKind } from "@shared/contract/extract-kinds";
import type { ExtractChanges } from "@shared/contract/extracts";
import type { Author, CatalogueCodes } from "../../catalogue";
import type { CheckNotes } from "../check/check-notes";
import type { IssueLog } from "../check/issue-log";
import type { Row } from "../check/row";

/** A column of the table in which a file's usable rows wait; `line` is always there. */
export type StagedColumn = { name: string; type: string };

export type ReaderContext = {
  row: Row;
  codes: CatalogueCodes;
  calendar: ChainCalendar;
  /** As it is where the chain is. */
  today: Day;
  notes: CheckNotes;
};

/** Reads the row at hand: its staged values in COPY's text format, of no use where `row.hasError` is set. */
export type RowReader = () => string;

export type StagedRows = { em: EntityManager; table: string };

/** All that differs from kind to kind of file. */
export type KindDefinition = {
  kind: ExtractKind;
  staged: readonly StagedColumn[];
  /** Staged columns by which a row stands for something. */
  key: readonly string[];
  /** SQL of that in the words of the file, over a staged row `staged`. */
  keyText: string;
  reader: (context: ReaderContext) => RowReader;
  /** Rules over several rows, by SQL: reports, and removes the rows that break them. */
  checkTogether?: (rows: StagedRows & { extractId: string; log: IssueLog; notes: CheckNotes; keep: boolean }) => Promise<void>;
  /** Staged column of the week, where rows have one. */
  weekColumn?: string;
  /** What loading would do to the database as it stands. */
  compare: (rows: StagedRows) => Promise<ExtractChanges>;
  /** Names what `compare` depends on besides the rows: while the name is the same, it would answer the same. */
  standing?: (em: EntityManager) => Promise<string>;
  /** Makes room for the rows, in a short transaction of its own before the load's; `weeks` are theirs, where known. */
  prepareLoad?: (rows: StagedRows & { weeks: readonly string[] | null }) => Promise<void>;
  /** Puts the rows in. Called inside the load's transaction, under its lock. */
  load: (rows: StagedRows & { extractId: string; now: Date; changes: ExtractChanges; by: Author }) => Promise<void>;
};
