/** Standard deviation with n - 1. */
export function standardDeviation(values: ArrayLike<number>): number {
  const list = Array.from(values);
  const mean = list.reduce((sum, value) => sum + value, 0) / list.length;
  return Math.sqrt(list.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (list.length - 1));
}

/** Largest |a - b|. */
export function largestDifference(left: ArrayLike<number>, right: ArrayLike<number>): number {
  if (left.length !== right.length) throw new Error(`${left.length} values against ${right.length}`);
  let largest = 0;
  for (let k = 0; k < left.length; k++) {
    const difference = Math.abs(left[k] - right[k]);
    if (!(difference <= largest)) largest = difference;
  }
  return largest;
}

/** Largest |a / b - 1|. */
export function largestRelativeDifference(left: ArrayLike<number>, right: ArrayLike<number>): number {
  return largestDifference(Array.from(left, (value, k) => value / right[k]), Array.from(right, () => 1));
}
