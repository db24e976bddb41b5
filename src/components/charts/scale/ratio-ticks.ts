import { roundTicks } from "./round-ticks";

/** From coarse to fine; each holds 1 and is the same within every power of ten. */
const ladders = [[1], [1, 3], [1, 2, 5], [1, 1.5, 2, 3, 5, 7]];

const rungsWithin = (ladder: readonly number[], low: number, high: number): number[] => {
  const ticks: number[] = [];
  for (let power = Math.floor(Math.log10(low)); power <= Math.ceil(Math.log10(high)); power++) {
    for (const rung of ladder) {
      const value = Number((rung * 10 ** power).toPrecision(6));
      if (value >= low * (1 - 1e-9) && value <= high * (1 + 1e-9)) ticks.push(value);
    }
  }
  return ticks;
};

/** At most `count` round multipliers within a log domain: 0.5, 1, 2; in a narrow one 0.9, 1, 1.1. */
export const ratioTicks = (low: number, high: number, count: number): number[] => {
  const fitting = ladders.map((ladder) => rungsWithin(ladder, low, high)).filter((ticks) => ticks.length <= count);
  const finest = fitting.at(-1) ?? [];
  return high / low < 4 && finest.length < 3 ? roundTicks(low, high, count) : finest;
};
