import type { JointSolution } from "./joint-solution";

/**
 * Pooled values less the curve's mean over the rows, e - 1(c'e), and the covariance of these: constants pass through a
 * local regression unchanged, so that the curve is then centred by itself.
 *
 * @param covariance over the joint unknowns, row-major. Changed.
 * @returns new unknowns, and the covariance given.
 * Cost: O(unknowns^2) per local regression.
 * @example centredPooled(joint, jointPosterior(joint).covariance).unknowns;
 */
export function centredPooled(
  { unknowns: given, system: { layout: { locals, size }, operators } }: JointSolution, covariance: Float64Array,
): { unknowns: Float64Array; covariance: Float64Array } {
  const unknowns = given.slice();
  const mean = new Float64Array(size);
  locals.forEach(({ first, count }, at) => {
    const { centring } = operators[at].basis;
    let level = 0;
    mean.fill(0);
    for (let k = 0; k < count; k++) {
      level += centring[k] * given[first + k];
      const row = (first + k) * size;
      for (let column = 0; column < size; column++) mean[column] += centring[k] * covariance[row + column];
    }
    for (let k = 0; k < count; k++) {
      unknowns[first + k] -= level;
      const row = (first + k) * size;
      for (let column = 0; column < size; column++) covariance[row + column] -= mean[column];
    }
    for (let row = 0; row < size; row++) subtractMean(covariance.subarray(row * size + first, row * size + first + count), centring);
  });
  return { unknowns, covariance };
}

function subtractMean(values: Float64Array, centring: Float64Array): void {
  let mean = 0;
  for (let k = 0; k < values.length; k++) mean += centring[k] * values[k];
  for (let k = 0; k < values.length; k++) values[k] -= mean;
}
