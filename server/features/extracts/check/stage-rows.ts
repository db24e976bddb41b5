import type { EntityManager } from "@mikro-orm/postgresql";
import { catalogueCodes } from "../../catalogue";
import { calendarOf, dayIn, getChain } from "../../chain";
import type { Layout, Separator } from "@shared/contract/layouts";
import type { Services } from "../../../services";
import type { Extract } from "../extracts.entities";
import { kinds } from "../kinds/kinds";
import type { KindDefinition } from "../kinds/kind";
import { addTax } from "../layouts/add-tax.repository";
import { createStaging } from "../load/staging.repository";
import { decodeText } from "../read/decode-text";
import { expandBytes } from "../read/expand-bytes";
import { readRecords, type CsvRecord } from "../read/read-records";
import { UnreadableFile } from "../read/unreadable-file";
import { CheckNotes } from "./check-notes";
import { CopyWriter } from "./copy-writer";
import { IssueLog } from "./issue-log";
import { intakeOf, type Intake } from "./intake";
import { Row } from "./row";

/** How far a check is: bytes of the stored file, and rows. */
export type StagingProgress = { readBytes: number; rowsRead: number; errors: number };

export type StagedFile = { table: string; rowsRead: number; log: IssueLog; notes: CheckNotes };

/** A compressed file may hold this many times what may be uploaded. */
const expandedLimitFactor = 4;

type Staging = {
  em: EntityManager;
  services: Services;
  extract: Pick<Extract, "id" | "kind" | "storageKey">;
  /** How the file is read; null for our own form. */
  layout: Layout | null;
  progress: (state: StagingProgress) => Promise<void>;
};

/**
 * Reads an extract's file once, from the store to the staging table, with flat memory: rows without an error are copied,
 * and what is wrong with the others is in the log. Nothing stays where it throws, since it runs in the context's transaction.
 *
 * @throws UnreadableFile where no row can be read.
 */
export async function stageRows({ em, services, extract, layout, progress }: Staging): Promise<StagedFile> {
  const definition = kinds[extract.kind];
  const chain = await getChain(em);
  const codes = await catalogueCodes(em);
  const table = await createStaging(em, { extractId: extract.id, columns: definition.staged });
  const log = new IssueLog();
  const notes = new CheckNotes();
  const today = dayIn(chain.timeZone, services.now());
  const writer = await CopyWriter.open(em, { table, columns: ["line", ...definition.staged.map(({ name }) => name)] });
  const state = { readBytes: 0, rowsRead: 0, errors: 0 };
  let stager: RowStager | undefined;
  try {
    const bytes = expandBytes(await services.files.get(extract.storageKey), {
      onRead: (readBytes) => { state.readBytes = readBytes; },
      limitBytes: chain.uploadLimitBytes * expandedLimitFactor,
    });
    for await (const records of readRecords(decodeText(bytes, layout?.encoding), layout ?? {})) {
      const rows = stager || layout?.hasHeader === false ? records : records.slice(1);
      stager ??= startStager({
        record: records[0], layout, definition, log, writer,
        read: (row) => definition.reader({ row, codes, today, notes, calendar: calendarOf(chain) }),
      });
      for (const record of rows) stager.stage(record);
      await writer.flush();
      state.rowsRead = stager.rowsRead;
      state.errors = stager.rowsWithErrors;
      await progress(state);
    }
    if (!stager) throw new UnreadableFile("no-header", "The file holds no lines. Check the export that made it.");
    if (stager.rowsRead === 0) throw new UnreadableFile("no-rows", "The file has a header, but no rows below it.");
    await writer.end();
    if (layout?.tax === "excluded") await addTax(em, { table, kind: extract.kind });
    return { table, rowsRead: stager.rowsRead, log, notes };
  } catch (error) {
    await writer.abandon(error instanceof Error ? error : new Error(String(error)));
    throw error;
  }
}

type Start = {
  record: CsvRecord;
  layout: Layout | null;
  definition: KindDefinition;
  log: IssueLog;
  writer: CopyWriter;
  read: (row: Row) => () => string;
};

function startStager({ record, layout, definition, log, writer, read }: Start): RowStager {
  if (!record.fields) throw new UnreadableFile("no-header", "The first line is no header: its quotes do not close, or it does not end.");
  const intake = intakeOf({ kind: definition.kind, layout, first: record.fields });
  log.nameColumns(intake.columnNames);
  if (intake.unknown.length > 0) {
    log.report({ line: record.line, column: "", value: intake.unknown.join(", "), rule: "unknown-column" });
  }
  const row = new Row(intake.header, log);
  return new RowStager({ intake, row, read: read(row), log, writer });
}

type StagerParts = { intake: Intake; row: Row; read: () => string; log: IssueLog; writer: CopyWriter };

/** Takes the records below the header, one after the other. */
class RowStager {
  rowsRead = 0;
  rowsWithErrors = 0;
  readonly #parts: StagerParts;

  constructor(parts: StagerParts) {
    this.#parts = parts;
  }

  stage({ line, fields, text = "" }: CsvRecord): void {
    const { intake, row, read, log, writer } = this.#parts;
    if (fields && fields.every((field) => field.trim() === "")) return;
    this.rowsRead++;
    if (!fields) {
      this.rowsWithErrors++;
      log.report({ line, column: "", value: text, rule: "open-quote" });
      return;
    }
    const isWhole = isWidth(fields, intake.header.width);
    // Fields of a ragged row stand for nobody knows what.
    if (!intake.read || !isWhole) row.begin(line, fields);
    else row.beginRead(line, intake.read(fields), fields);
    if (!isWhole) reportRagged(fields, intake, row);
    const staged = isWhole ? read() : "";
    if (row.hasError) this.rowsWithErrors++;
    else writer.add(`${line}\t${staged}`);
  }
}

const separatorNames: Record<Separator, string> = { ",": "comma", ";": "semicolon", "\t": "tab", "|": "bar" };

function reportRagged(fields: readonly string[], { header, separator }: Intake, row: Row): void {
  row.report({
    column: "", value: fields.join(separator), rule: "ragged-row",
    reason: `The row has ${fields.length} fields, the header ${header.width}`,
    remedy: `A ${separatorNames[separator]} inside a value needs quotes around the value.`,
  });
}

/** Empty fields behind the last column are what spreadsheets leave; nothing is lost with them. */
function isWidth(fields: readonly string[], width: number): boolean {
  return fields.length === width || (fields.length > width && fields.slice(width).every((field) => field.trim() === ""));
}
