/**
 * What moves units beyond the drivers, on the log scale, next to each row's own noise (a product's `dispersion`).
 * The first two are what a week shares across stores, the last is what persists in a store from week to week.
 */
export const trueNoise = {
  /** Standard deviation of a week's shock to all products of a category in all stores. */
  categoryWeekSpread: 0.035,
  /** Standard deviation of a week's shock to one product in all stores. */
  productWeekSpread: 0.04,
  /** Standard deviation of the level of a product in a store that persists from week to week. */
  persistentSpread: 0.05,
  /** First-order autocorrelation of that level. */
  persistence: 0.6,
};

/** Standard deviation of what a product's week shares across stores. */
export const sharedSpread = Math.hypot(trueNoise.categoryWeekSpread, trueNoise.productWeekSpread);
