/** Fewer weeks than this near a value do not support it. */
export const fewestWeeks = 5;

/**
 * The stretches of an axis to hatch: where fewer than five weeks lie near a value, or nothing was seen at all.
 * `support` counts the weeks near each x.
 */
export const unseenRanges = (x: readonly number[], support: readonly number[]): [number, number][] => {
  const ranges: [number, number][] = [];
  let start: number | null = null;
  x.forEach((value, index) => {
    const isSeen = support[index] >= fewestWeeks;
    const middle = index === 0 ? value : (x[index - 1] + value) / 2;
    if (!isSeen && start === null) start = middle;
    if (isSeen && start !== null) {
      ranges.push([start, middle]);
      start = null;
    }
  });
  if (start !== null) ranges.push([start, x[x.length - 1]]);
  return ranges.filter(([from, to]) => to > from);
};
