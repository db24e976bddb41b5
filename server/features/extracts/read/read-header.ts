import type { ExtractKind } from "@shared/contract/extract-kinds";
import { ownLayout } from "@shared/layouts";
import { UnreadableFile } from "./unreadable-file";

/** Where each column of ours stands in the records that are checked. */
export type Header = {
  positions: ReadonlyMap<string, number>;
  /** How many fields a record of the file has. */
  width: number;
  /** Where in the file each of the checked values stands, where a layout has put them in another order; null: nowhere. */
  theirPositions?: readonly (number | null)[];
  /** Amounts from here on cannot be kept. */
  amountLimit?: number;
};

/**
 * Finds our columns by their names, in any order and case.
 *
 * @returns the header, and its names that are not ours; "(no name)" where there is none.
 * @throws UnreadableFile where the fields are no header of our own form.
 */
export function readHeader(kind: ExtractKind, fields: readonly string[]): Header & { unknown: string[] } {
  const names = fields.map((field) => field.trim().toLowerCase());
  const own = ownLayout(kind, fields);
  if (!own) throw new UnreadableFile("layout-needed", `The first line is not the header of a ${kind} file in our own form. Say under "How it is read" which column holds what.`);
  const ours = new Set(Object.keys(own.mapping));
  return {
    positions: new Map(names.map((name, at) => [name, at] as const).filter(([name]) => ours.has(name))),
    width: names.length,
    unknown: names.filter((name) => !ours.has(name)).map((name) => name || "(no name)"),
  };
}
