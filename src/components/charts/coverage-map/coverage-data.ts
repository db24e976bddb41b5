/** What is known of a store in a week. */
export type CellState = "there" | "thin" | "restated" | "withdrawn" | "missing" | "closed";

export const cellStates: readonly CellState[] = ["there", "thin", "restated", "withdrawn", "missing", "closed"];

/** A store's weeks, oldest first; the lists are in the order of the chart's weeks. */
export type CoverageStore = {
  code: string;
  name: string;
  region: string;
  states: readonly CellState[];
  /** Rows loaded. */
  rows: readonly number[];
  /** Place of the file among the chart's files; null where there is none. */
  files: readonly (number | null)[];
};

/** One store in one week, by its place among the chart's rows and weeks. */
export type CellPlace = { row: number; week: number };

/** The chart's lines from the top: each region's heading, then its stores by name. */
export type CoverageRow = { kind: "region"; name: string; stores: number } | { kind: "store"; store: CoverageStore };

const compare = new Intl.Collator("en", { numeric: true, sensitivity: "base" }).compare;

/** Stores grouped by region, both by name. */
export const coverageRows = (stores: readonly CoverageStore[]): CoverageRow[] => {
  const byRegion = new Map<string, CoverageStore[]>();
  for (const store of stores) byRegion.set(store.region, [...(byRegion.get(store.region) ?? []), store]);
  return [...byRegion]
    .sort(([one], [other]) => compare(one, other))
    .flatMap(([name, members]): CoverageRow[] => [
      { kind: "region", name, stores: members.length },
      ...[...members].sort((one, other) => compare(one.name, other.name)).map((store) => ({ kind: "store" as const, store })),
    ]);
};

/** How many store-weeks stand in each state. */
export const countStates = (stores: readonly CoverageStore[]): Record<CellState, number> => {
  const counts: Record<CellState, number> = { there: 0, thin: 0, restated: 0, withdrawn: 0, missing: 0, closed: 0 };
  for (const { states } of stores) for (const state of states) counts[state] += 1;
  return counts;
};

/** Weeks of a store that follow each other in one state; `first` and `last` are places among the weeks. */
export type Stretch = { state: CellState; first: number; last: number; rows: number };

export const stretchesOf = ({ states, rows }: Pick<CoverageStore, "states" | "rows">): Stretch[] => {
  const stretches: Stretch[] = [];
  states.forEach((state, week) => {
    const open = stretches.at(-1);
    if (open?.state === state) Object.assign(open, { last: week, rows: open.rows + rows[week] });
    else stretches.push({ state, first: week, last: week, rows: rows[week] });
  });
  return stretches;
};
