import type { TemperatureWeek } from "@shared/contract/catalogue-temperatures";

/** Runs of neighbouring weeks that have a value: a gap is a gap. */
export const runsOf = (weeks: readonly TemperatureWeek[], value: (week: TemperatureWeek) => number | null): { index: number; value: number }[][] => {
  const runs: { index: number; value: number }[][] = [];
  let run: { index: number; value: number }[] = [];
  weeks.forEach((week, index) => {
    const known = value(week);
    if (known !== null) run.push({ index, value: known });
    else if (run.length > 0) {
      runs.push(run);
      run = [];
    }
  });
  return run.length > 0 ? [...runs, run] : runs;
};

/** Lowest and highest of all that is drawn; null where nothing is known. */
export const extentOf = (weeks: readonly TemperatureWeek[]): [number, number] | null => {
  const values = weeks.flatMap(({ temperatureC, normalC, lowC, highC }) => [temperatureC, normalC, lowC, highC]).filter((value) => value !== null);
  return values.length === 0 ? null : [Math.min(...values), Math.max(...values)];
};

/** "2.4 warmer than usual" in degrees of the chain's unit; null where either is not known. */
export const differenceOf = ({ temperatureC, normalC }: TemperatureWeek): number | null =>
  temperatureC === null || normalC === null ? null : temperatureC - normalC;
