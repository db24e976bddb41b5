import { toCsv } from "./csv";
import type { CsvTable } from "./csv";

/** Hands a file made in the browser to the person. */
export const saveBlob = (blob: Blob, fileName: string): void => {
  const address = URL.createObjectURL(blob);
  const link = document.createElement("a");
  link.href = address;
  link.download = fileName;
  document.body.append(link);
  link.click();
  link.remove();
  // Revoking at once can cut the download short in some browsers.
  setTimeout(() => URL.revokeObjectURL(address), 10_000);
};

/** The byte order mark tells spreadsheets that the file is UTF-8. */
export const saveCsv = (table: CsvTable, name: string): void =>
  saveBlob(new Blob(["\uFEFF", toCsv(table)], { type: "text/csv;charset=utf-8" }), `${fileNameOf(name)}.csv`);

/** A title as a file name: letters and digits of any language, joined by hyphens. */
export const fileNameOf = (title: string): string =>
  title
    .normalize("NFC")
    .toLowerCase()
    .replace(/[^\p{L}\p{N}]+/gu, "-")
    .replace(/^-+|-+$/g, "")
    .slice(0, 80) || "shelftide";
