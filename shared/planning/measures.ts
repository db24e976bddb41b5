import { PlanningError } from "./planning-error";

/** What happened and what was predicted, of equal length. */
export type ActualAndPredicted = { actual: ArrayLike<number>; predicted: ArrayLike<number> };

/**
 * Weighted absolute percentage error: sum of |actual - predicted| / sum of |actual|. 0 is perfect.
 *
 * @returns null when nothing was sold.
 * @throws PlanningError "unusable-value" when lengths differ.
 * @example weightedAbsolutePercentageError({ actual: [10, 30], predicted: [14, 30] }) // 0.1
 */
export function weightedAbsolutePercentageError({ actual, predicted }: ActualAndPredicted): number | null {
  requireEqualLengths(actual, predicted);
  let error = 0;
  let total = 0;
  for (let index = 0; index < actual.length; index++) {
    error += Math.abs(actual[index] - predicted[index]);
    total += Math.abs(actual[index]);
  }
  return total > 0 ? error / total : null;
}

/**
 * Bias: (sum of predicted - sum of actual) / sum of actual. Above 0: predicted too much.
 *
 * @returns null when nothing was sold.
 * @throws PlanningError "unusable-value" when lengths differ.
 * @example bias({ actual: [10, 30], predicted: [14, 30] }) // 0.1
 */
export function bias({ actual, predicted }: ActualAndPredicted): number | null {
  requireEqualLengths(actual, predicted);
  let difference = 0;
  let total = 0;
  for (let index = 0; index < actual.length; index++) {
    difference += predicted[index] - actual[index];
    total += actual[index];
  }
  return total > 0 ? difference / total : null;
}

/**
 * Mean absolute scaled error (Hyndman & Koehler, International Journal of Forecasting 22 (2006) 679-688, section 3): the mean
 * absolute error over that of the naive rule "as one season before" within the weeks learnt from. Below 1: better than naive.
 *
 * @param learntFrom the series before the predicted weeks, in order, without gaps.
 * @param season 1 for "as last week", 52 for "as last year".
 * @returns null when `learntFrom` is no longer than a season or never changed.
 * @throws PlanningError "unusable-value" when lengths differ or nothing is compared.
 * @example meanAbsoluteScaledError({ actual: [12], predicted: [11], learntFrom: [8, 10, 12], season: 1 }) // 0.5
 */
export function meanAbsoluteScaledError({
  actual, predicted, learntFrom, season,
}: ActualAndPredicted & { learntFrom: ArrayLike<number>; season: number }): number | null {
  requireEqualLengths(actual, predicted);
  if (actual.length === 0) throw new PlanningError("unusable-value", "An error needs at least one week that was predicted.");
  let naiveError = 0;
  for (let index = season; index < learntFrom.length; index++) {
    naiveError += Math.abs(learntFrom[index] - learntFrom[index - season]);
  }
  if (!(naiveError > 0)) return null;
  let error = 0;
  for (let index = 0; index < actual.length; index++) error += Math.abs(actual[index] - predicted[index]);
  return error / actual.length / (naiveError / (learntFrom.length - season));
}

/**
 * Coverage: the share of actual values within their interval, ends included. Near the interval's level when it is honest.
 *
 * @returns null when there are no values.
 * @throws PlanningError "unusable-value" when lengths differ.
 * @example coverage({ actual: [5, 9], lower: [4, 4], upper: [6, 8] }) // 0.5
 */
export function coverage({
  actual, lower, upper,
}: { actual: ArrayLike<number>; lower: ArrayLike<number>; upper: ArrayLike<number> }): number | null {
  requireEqualLengths(actual, lower);
  requireEqualLengths(actual, upper);
  let within = 0;
  for (let index = 0; index < actual.length; index++) {
    if (actual[index] >= lower[index] && actual[index] <= upper[index]) within++;
  }
  return actual.length > 0 ? within / actual.length : null;
}

function requireEqualLengths(one: ArrayLike<number>, other: ArrayLike<number>): void {
  if (one.length !== other.length) {
    throw new PlanningError("unusable-value", `Values to compare must be equally many: ${one.length} against ${other.length}.`);
  }
}
