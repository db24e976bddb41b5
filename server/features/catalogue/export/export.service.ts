import type { EntityManager } from "@mikro-orm/postgresql";
import { byteOrderMark, csvLines } from "@shared/csv";
import { exportColumns, exportQueries, type ExportedKind } from "./export-files";
import { rowsOf } from "./export.repository";

/**
 * A part of the catalogue as the text of a file in our own form: uploaded again, every row is there already. Texts that a
 * spreadsheet would run as formulas have an apostrophe in front, which the upload takes off again.
 */
export async function* exportFile(em: EntityManager, kind: ExportedKind): AsyncGenerator<string> {
  yield byteOrderMark + csvLines([exportColumns(kind)]);
  await em.begin();
  try {
    for await (const rows of rowsOf(em, exportQueries[kind])) yield csvLines(rows);
  } finally {
    // Nothing was written.
    await em.rollback();
  }
}
