/** Something worked out from a file's head, and how sure it is: 1 certain, 0.5 a guess. */
export type Detected<Value> = { value: Value; confidence: number; warnings: LayoutWarning[] };

/** What a person should look at before trusting a detected layout. */
export type LayoutWarning = {
  /** Stable name for programs. */
  code: string;
  message: string;
  /** Position of the file's column it speaks of, from 0. */
  position?: number;
};

/** How many bytes at a file's beginning are looked at. */
export const headBytes = 64 * 1024;

/** Of a file's columns and of their names, values and words no more is kept. */
export const mostColumns = 500;
export const longestName = 200;

/** A header's fields as the names that layouts keep. */
export function namesIn(header: readonly string[]): string[] {
  return header.slice(0, mostColumns).map((name) => name.trim().slice(0, longestName));
}

/** The share of a list for which something holds; 0 for an empty list. */
export function shareOf<Item>(items: readonly Item[], holds: (item: Item) => boolean): number {
  return items.length === 0 ? 0 : items.filter(holds).length / items.length;
}
