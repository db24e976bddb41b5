import type { CellPlace, CellState, CoverageRow } from "./coverage-data";

export type CellSize = { width: number; height: number };

const narrowest = 13;
const widest = 56;

const names = { narrow: 104, wide: 156 };
/** Below this width names are kept short. */
const narrowPage = 560;

/**
 * Cells share the width beside the names; where that would make them too narrow, the chart scrolls. What is left over by whole
 * pixels goes to the names, as long as it is little.
 */
export const shareWidth = ({ weeks, width }: { weeks: number; width: number }): { cell: number; namesWidth: number } => {
  const least = width < narrowPage ? names.narrow : names.wide;
  const cell = Math.max(narrowest, Math.min(widest, Math.floor((width - least) / Math.max(1, weeks))));
  const left = width - least - cell * weeks;
  return { cell, namesWidth: left > 0 && left < 100 ? least + left : least };
};

const gap = 1;
const inset = 3;

type Box = { left: number; right: number; top: number; bottom: number };

const boxOf = (week: number, { width, height }: CellSize): Box => ({
  left: week * width + gap, right: (week + 1) * width - gap, top: inset, bottom: height - inset,
});

const rectangle = ({ left, right, top, bottom }: Box) => `M${left} ${top}H${right}V${bottom}H${left}Z`;
/** Strokes lie half outside their path. */
const outline = ({ left, right, top, bottom }: Box) =>
  rectangle({ left: left + 0.75, right: right - 0.75, top: top + 0.75, bottom: bottom - 0.75 });

/** Small enough for the narrowest cell. */
const arm = 2.5;

const cross = ({ left, right, top, bottom }: Box): string => {
  const [x, y] = [(left + right) / 2, (top + bottom) / 2];
  return `M${x - arm} ${y - arm}L${x + arm} ${y + arm}M${x - arm} ${y + arm}L${x + arm} ${y - arm}`;
};

const notch = 5;

/** A mark's filled part and its drawn part; either may be empty. */
export type MarkPaths = { ground: string; line: string };

const filled = (ground: string): MarkPaths => ({ ground, line: "" });

/** Each state has a mark of its own, so that none is told by colour alone. */
const marks: Record<CellState, (box: Box) => MarkPaths> = {
  there: (box) => filled(rectangle(box)),
  thin: (box) => filled(rectangle({ ...box, top: box.bottom - Math.round((box.bottom - box.top) * 0.4) })),
  restated: ({ left, right, top, bottom }) => filled(`M${left} ${top}H${right - notch}L${right} ${top + notch}V${bottom}H${left}Z`),
  withdrawn: (box) => ({ ground: "", line: `${outline(box)}M${box.left + 3} ${(box.top + box.bottom) / 2}H${box.right - 3}` }),
  missing: (box) => ({ ground: rectangle(box), line: cross(box) }),
  closed: (box) => filled(rectangle(box)),
};

/** A store's row as one mark a state: a few elements, however many weeks. */
export const rowPaths = (states: readonly CellState[], size: CellSize): [CellState, MarkPaths][] => {
  const paths = new Map<CellState, MarkPaths>();
  states.forEach((state, week) => {
    const { ground, line } = marks[state](boxOf(week, size));
    const before = paths.get(state);
    paths.set(state, { ground: `${before?.ground ?? ""}${ground}`, line: `${before?.line ?? ""}${line}` });
  });
  return [...paths];
};

/** Weeks with a name under which those up to the next stand: years and quarters of the chain's calendar. */
export type Mark = { week: number; label: string; isYear: boolean };

export type WeekNumber = { week: number; year: number };

/** Quarters begin with weeks 1, 14, 27 and 40; a 53rd week belongs to the last. */
export const quarterOf = ({ week }: WeekNumber): number => Math.min(4, Math.ceil(week / 13));

/** Where a year or quarter begins; the first week is named as well. */
export const calendarMarks = (numbers: readonly WeekNumber[]): Mark[] =>
  numbers.flatMap((number, week) => {
    const before = numbers[week - 1];
    const isYear = before?.year !== number.year;
    if (before && !isYear && quarterOf(before) === quarterOf(number)) return [];
    return [{ week, isYear, label: `Q${quarterOf(number)}` }];
  });

/** The next cell in a direction; headings of regions are stepped over, and the ends hold. */
export const moveCell = (place: CellPlace, key: string, { rows, weeks }: { rows: readonly CoverageRow[]; weeks: number }): CellPlace | null => {
  const stores = rows.flatMap((row, at) => (row.kind === "store" ? [at] : []));
  const now = Math.max(0, stores.indexOf(place.row));
  const within = (value: number, most: number) => Math.max(0, Math.min(most, value));
  const down = (steps: number) => ({ ...place, row: stores[within(now + steps, stores.length - 1)] });
  const along = (steps: number) => ({ ...place, week: within(place.week + steps, weeks - 1) });
  const moves: Record<string, () => CellPlace> = {
    ArrowLeft: () => along(-1), ArrowRight: () => along(1), ArrowUp: () => down(-1), ArrowDown: () => down(1),
    Home: () => along(-weeks), End: () => along(weeks), PageUp: () => down(-10), PageDown: () => down(10),
  };
  return stores.length > 0 && weeks > 0 ? (moves[key]?.() ?? null) : null;
};
