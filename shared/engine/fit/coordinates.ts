import { backwardSolve, invertFactored } from "../linalg/cholesky";
import { stridedProduct } from "../linalg/strided-product";
import type { DenseSystem } from "./dense-system";
import type { LikelihoodState } from "./likelihood-state";
import type { PenalisedSystem } from "./restricted-likelihood";

/**
 * Estimates of the shared coordinates, unpenalised ones first; zero for dropped columns.
 *
 * @param state at any level, of this system.
 * @example sharedCoordinates(system, search.current)[0]; // the intercept's, less the shift of the response
 */
export function sharedCoordinates(system: PenalisedSystem, state: LikelihoodState): Float64Array {
  if (system.form === "arrow") return state.coefficients.slice();
  const { unpenalised, size, cross, solved, factor, dropped } = system;
  const coordinates = new Float64Array(unpenalised + size);
  const fixed = coordinates.subarray(0, unpenalised);
  fixed.set(solved);
  for (let row = 0; row < unpenalised; row++) {
    for (let k = 0; k < size; k++) fixed[row] -= cross[row * size + k] * state.coefficients[k];
  }
  backwardSolve(factor, unpenalised, fixed);
  for (const { column } of dropped) fixed[column] = 0;
  coordinates.set(state.coefficients, unpenalised);
  return coordinates;
}

/**
 * The shared coordinates' part of (X'WX + S)^-1, row-major; zero for dropped columns. O(size^3).
 *
 * @param state at level gradient.
 */
export function coordinateCovariance(system: PenalisedSystem, state: LikelihoodState): Float64Array {
  if (system.form === "dense") return denseCovariance(system, state);
  const covariance = state.inverse.slice();
  for (const { column } of system.dropped) covariance[column * (system.size + 1)] = 0;
  return covariance;
}

/**
 * With K = A_00^-1 A_0q its blocks are
 * A_00^-1 + K H^-1 K', -K H^-1 and H^-1 (Golub & Van Loan 1996, section 3.2, partitioned inverse). O(size^3).
 */
function denseCovariance(system: DenseSystem, state: LikelihoodState): Float64Array {
  const { unpenalised, size, factor, dropped } = system;
  const all = unpenalised + size;
  const covariance = new Float64Array(all * all);
  const inverse = new Float64Array(unpenalised * unpenalised);
  invertFactored(factor.slice(), unpenalised, inverse);
  for (const { column } of dropped) inverse[column * unpenalised + column] = 0;
  const back = backSolvedCross(system);
  const spread = new Float64Array(unpenalised * size);
  const left = { values: back, at: 0, rows: unpenalised, inner: size, rowStep: size, innerStep: 1 };
  stridedProduct(left, { values: state.inverse, at: 0, columns: size }, { values: spread, at: 0, lowerOnly: false });
  for (let row = 0; row < unpenalised; row++) {
    for (let column = 0; column < unpenalised; column++) {
      let sum = inverse[row * unpenalised + column];
      for (let k = 0; k < size; k++) sum += spread[row * size + k] * back[column * size + k];
      covariance[row * all + column] = sum;
    }
    for (let column = 0; column < size; column++) {
      const value = -spread[row * size + column];
      covariance[row * all + unpenalised + column] = value;
      covariance[(unpenalised + column) * all + row] = value;
    }
  }
  for (let row = 0; row < size; row++) {
    const to = (unpenalised + row) * all + unpenalised;
    for (let column = 0; column < size; column++) covariance[to + column] = state.inverse[row * size + column];
  }
  return covariance;
}

/** K = A_00^-1 A_0q = L^-T (L^-1 A_0q), row-major unpenalised x size. */
function backSolvedCross({ unpenalised, size, factor, cross }: DenseSystem): Float64Array {
  const back = cross.slice();
  for (let row = unpenalised - 1; row >= 0; row--) {
    for (let k = row + 1; k < unpenalised; k++) {
      const weight = factor[k * unpenalised + row];
      for (let column = 0; column < size; column++) back[row * size + column] -= weight * back[k * size + column];
    }
    for (let column = 0; column < size; column++) back[row * size + column] /= factor[row * unpenalised + row];
  }
  return back;
}

