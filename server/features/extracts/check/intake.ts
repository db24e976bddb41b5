import type { ExtractKind } from "@shared/contract/extract-kinds";
import type { Layout, Separator } from "@shared/contract/layouts";
import { applyLayout, LayoutError, namesIn, type OurRecord } from "@shared/layouts";
import type { Header } from "../read/read-header";
import { readHeader } from "../read/read-header";
import { UnreadableFile } from "../read/unreadable-file";

/** How a file's records become rows to check. */
export type Intake = {
  header: Header;
  /** Our columns -> what issues call them, where the file calls them something else. */
  columnNames: ReadonlyMap<string, string>;
  /** Columns of the file that nobody has said anything about. */
  unknown: readonly string[];
  separator: Separator;
  /** Puts a record into our columns; absent where it has them as they are. */
  read?: (fields: readonly string[]) => OurRecord;
};

/** Amounts to which tax is still to be added must leave room for it; a rate is at most 1. */
const mostWithoutTax = 4_999_999_999;
const longestTheirName = 60;

/**
 * The intake of a file, by its first record.
 *
 * @param layout null for our own form
 * @throws UnreadableFile where the header lacks columns that are needed, or that the layout reads.
 */
export function intakeOf({ kind, layout, first }: { kind: ExtractKind; layout: Layout | null; first: readonly string[] }): Intake {
  if (layout) return intakeByLayout(layout, first);
  const { unknown, ...header } = readHeader(kind, first);
  return { header, columnNames: new Map(), unknown, separator: "," };
}

function intakeByLayout(layout: Layout, first: readonly string[]): Intake {
  const names = layout.hasHeader ? namesIn(first) : layout.theirColumns;
  const { columns, positions, read } = applied(layout, names);
  const columnNames = columns.flatMap((column, at): [string, string][] => {
    const position = positions[at] ?? null;
    const theirs = position === null ? "" : layout.hasHeader ? (names[position] ?? "") : `column ${position + 1}`;
    return theirs === "" || theirs.toLowerCase() === column ? [] : [[column, `${theirs.slice(0, longestTheirName)} (${column})`]];
  });
  return {
    header: {
      positions: new Map(columns.map((column, at) => [column, at])), width: layout.hasHeader ? first.length : names.length, theirPositions: positions,
      amountLimit: layout.tax === "excluded" ? mostWithoutTax : undefined,
    },
    columnNames: new Map(columnNames), unknown: [], separator: layout.separator, read,
  };
}

function applied(layout: Layout, names: readonly string[]) {
  try {
    return applyLayout(layout, names);
  } catch (error) {
    if (!(error instanceof LayoutError)) throw error;
    throw new UnreadableFile("layout-does-not-fit", `${error.message} Change how it is read, or upload the file that the layout is for.`);
  }
}
