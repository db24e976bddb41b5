import type { Encoding, Layout, Separator } from "@shared/contract/layouts";

export const encodingWords: Record<Encoding, string> = {
  "utf-8": "UTF-8, usual today",
  "windows-1252": "Windows-1252, older Western European systems",
  "utf-16le": "UTF-16, as spreadsheets save “Unicode text”",
  "utf-16be": "UTF-16, the other byte first",
};

export const separatorWords: Record<Separator, string> = {
  ",": "Commas",
  ";": "Semicolons",
  "\t": "Tabs",
  "|": "Upright bars",
};

const dateWords: Record<Layout["dateOrder"], string> = {
  iso: "days from the year down",
  dmy: "days before months",
  mdy: "months before days",
};

const shortEncodings: Record<Encoding, string> = {
  "utf-8": "UTF-8", "windows-1252": "Windows-1252", "utf-16le": "UTF-16", "utf-16be": "UTF-16",
};

/** A layout in a line: "Semicolons, decimal comma, days before months, Windows-1252, without tax". */
export const layoutSentence = (layout: Layout): string =>
  [
    separatorWords[layout.separator],
    layout.hasHeader ? null : "no header",
    layout.decimal === "," ? "decimal comma" : "decimal point",
    dateWords[layout.dateOrder],
    layout.weekDay === "last" ? "weeks by their last day" : null,
    shortEncodings[layout.encoding],
    layout.tax === "excluded" ? "without tax" : null,
  ]
    .filter((part) => part !== null)
    .join(", ");
