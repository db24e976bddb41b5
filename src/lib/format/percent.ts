import { missing, thinSpace } from "./glyphs";
import { formatNumber } from "./number";
import type { NumberOptions } from "./number";

/** A share as percent with a thin space: 0.42 is "42 %", signed "+42 %". */
export const formatPercent = (share: number | null | undefined, options: NumberOptions = {}): string => {
  if (share === null || share === undefined || !Number.isFinite(share)) return missing;
  return `${formatNumber(share * 100, options)}${thinSpace}%`;
};

/** "+117 to +170": an interval of lifts, whose unit stands with the number before it. */
export const formatPercentInterval = (lower: number, upper: number): string =>
  `${formatNumber(lower * 100, { signed: true })} to ${formatNumber(upper * 100, { signed: true })}`;
