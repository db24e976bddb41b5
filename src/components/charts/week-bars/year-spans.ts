import type { WeekBar } from "./week-layout";

/** Bars that follow each other in one year. */
export type YearSpan = { year: number; left: number; right: number };

/** Where each year begins and ends along the foot, oldest first; none where all bars are of one year. */
export const yearSpans = (bars: readonly WeekBar[]): YearSpan[] => {
  const spans: YearSpan[] = [];
  for (const { year, left, width } of bars) {
    const last = spans.at(-1);
    if (last?.year === year) last.right = left + width;
    else spans.push({ year, left, right: left + width });
  }
  return spans.length > 1 ? spans : [];
};

/** Room that the years take below the weeks' names. */
export const yearsHeight = 18;
