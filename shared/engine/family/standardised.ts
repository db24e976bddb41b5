/**
 * A deviation in standard deviations; 0 where there is neither deviation nor variance (a perfect fit).
 *
 * @example standardised(3, 9); // 1
 */
export const standardised = (deviation: number, variance: number): number =>
  deviation === 0 ? 0 : deviation / Math.sqrt(Math.max(variance, Number.MIN_VALUE));
