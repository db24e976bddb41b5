import type { CellPlace, CellState, CoverageRow } from "./coverage-data";

export type CellSize = { width: number; height: number };

const narrowest = 13;
const widest = 26;

/** Cells share the width there is; where that would make them too narrow, the chart scrolls. */
export const cellWidth = (weeks: number, width: number): number =>
  Math.max(narrowest, Math.min(widest, Math.floor(width / Math.max(1, weeks))));

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

const notch = 5;

/** Each state has a mark of its own, so that none is told by colour alone. */
const marks: Record<CellState, (box: Box) => string> = {
  there: rectangle,
  thin: (box) => rectangle({ ...box, top: box.bottom - Math.round((box.bottom - box.top) * 0.4) }),
  restated: ({ left, right, top, bottom }) => `M${left} ${top}H${right - notch}L${right} ${top + notch}V${bottom}H${left}Z`,
  withdrawn: (box) => `${outline(box)}M${box.left + 3} ${(box.top + box.bottom) / 2}H${box.right - 3}`,
  missing: (box) => {
    const [x, y] = [(box.left + box.right) / 2, (box.top + box.bottom) / 2];
    return `${outline(box)}M${x - 2} ${y - 2}L${x + 2} ${y + 2}M${x - 2} ${y + 2}L${x + 2} ${y - 2}`;
  },
  closed: rectangle,
};

/** A store's row as one path a state: a few elements, however many weeks. */
export const rowPaths = (states: readonly CellState[], size: CellSize): [CellState, string][] => {
  const paths = new Map<CellState, string>();
  states.forEach((state, week) => paths.set(state, `${paths.get(state) ?? ""}${marks[state](boxOf(week, size))}`));
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
