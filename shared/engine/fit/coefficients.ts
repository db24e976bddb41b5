import { backwardSolve, invertFactored } from "../linalg/cholesky";
import type { Design, DesignTerm } from "./design";
import { coordinateAt } from "./normal-equations";
import type { ReducedSystem } from "./reduced-system";
import type { LikelihoodState } from "./restricted-likelihood";

/** Fitting coordinates of the whole model, length `design.size`: the unpenalised ones recovered from the penalised. */
export function solveCoordinates(reduced: ReducedSystem, state: LikelihoodState): Float64Array {
  const { unpenalised, size, cross, solved, factor } = reduced;
  const coordinates = new Float64Array(unpenalised + size);
  const fixed = coordinates.subarray(0, unpenalised);
  fixed.set(solved);
  for (let row = 0; row < unpenalised; row++) {
    for (let k = 0; k < size; k++) fixed[row] -= cross[row * size + k] * state.coefficients[k];
  }
  backwardSolve(factor, unpenalised, fixed);
  for (const { column } of reduced.dropped) fixed[column] = 0;
  coordinates.set(state.coefficients, unpenalised);
  return coordinates;
}

/** (X'WX + S)^-1 in fitting coordinates, row-major; zero for dropped columns. O(size^3). */
export function coordinateCovariance(reduced: ReducedSystem, state: LikelihoodState): Float64Array {
  const { unpenalised, size, factor, dropped } = reduced;
  const all = unpenalised + size;
  const covariance = new Float64Array(all * all);
  const inverse = new Float64Array(unpenalised * unpenalised);
  const back = reduced.cross.slice();
  for (let row = unpenalised - 1; row >= 0; row--) {
    for (let k = row + 1; k < unpenalised; k++) {
      const weight = factor[k * unpenalised + row];
      for (let column = 0; column < size; column++) back[row * size + column] -= weight * back[k * size + column];
    }
    for (let column = 0; column < size; column++) back[row * size + column] /= factor[row * unpenalised + row];
  }
  const spread = new Float64Array(unpenalised * size);
  for (let row = 0; row < unpenalised; row++) {
    for (let k = 0; k < size; k++) {
      const weight = back[row * size + k];
      for (let column = 0; column < size; column++) spread[row * size + column] += weight * state.inverse[k * size + column];
    }
  }
  invertFactored(factor.slice(), unpenalised, inverse);
  for (const { column } of dropped) inverse[column * unpenalised + column] = 0;
  for (let row = 0; row < unpenalised; row++) {
    for (let column = 0; column < unpenalised; column++) {
      let sum = inverse[row * unpenalised + column];
      for (let k = 0; k < size; k++) sum += spread[row * size + k] * back[column * size + k];
      covariance[row * all + column] = sum;
    }
    for (let column = 0; column < size; column++) {
      covariance[row * all + unpenalised + column] = -spread[row * size + column];
      covariance[(unpenalised + column) * all + row] = -spread[row * size + column];
    }
  }
  for (let row = 0; row < size; row++) {
    for (let column = 0; column < size; column++) {
      covariance[(unpenalised + row) * all + unpenalised + column] = state.inverse[row * size + column];
    }
  }
  return covariance;
}

/**
 * The linear map from fitting coordinates to coefficients, row-major rawSize x size: each term by its own transform, each
 * curve less its mean over the rows, the means moved to the intercept.
 */
export function coefficientMap(design: Design): Float64Array {
  const { size, rawSize } = design;
  const map = new Float64Array(rawSize * size);
  map[0] = 1;
  for (const { design: part, basis } of design.terms) {
    writePart(part, map, size);
    if (!("centring" in basis)) continue;
    const width = part.coordinates.unpenalised + part.coordinates.penalised;
    for (let own = 0; own < width; own++) {
      const column = coordinateAt(part, own);
      let mean = 0;
      for (let k = 0; k < part.coordinates.rawWidth; k++) mean += basis.centring[k] * map[(part.rawFirst + k) * size + column];
      for (let k = 0; k < part.coordinates.rawWidth; k++) map[(part.rawFirst + k) * size + column] -= mean;
      map[column] += mean;
    }
  }
  return map;
}

function writePart(part: DesignTerm, map: Float64Array, size: number): void {
  const { transform, rawWidth, unpenalised, penalised } = part.coordinates;
  const width = unpenalised + penalised;
  for (let k = 0; k < rawWidth; k++) {
    const row = (part.rawFirst + k) * size;
    if (transform.form === "scaled") map[row + coordinateAt(part, 0)] = transform.factor;
    else if (transform.form === "dense") {
      for (let own = 0; own < width; own++) map[row + coordinateAt(part, own)] = transform.matrix[k * width + own];
    } else if (k !== transform.leftOut) map[row + coordinateAt(part, k < transform.leftOut ? k : k - 1)] = 1;
  }
}

/** map x coordinates. */
export function applyMap(map: Float64Array, coordinates: Float64Array, rawSize: number): Float64Array {
  const size = coordinates.length;
  const coefficients = new Float64Array(rawSize);
  for (let row = 0; row < rawSize; row++) {
    let sum = 0;
    for (let k = 0; k < size; k++) sum += map[row * size + k] * coordinates[k];
    coefficients[row] = sum;
  }
  return coefficients;
}

/** map x covariance x map' x scale, packed lower triangle. Zeros of the map are skipped. */
export function mapCovariance(
  map: Float64Array, covariance: Float64Array, sizes: { size: number; rawSize: number; scale: number },
): Float64Array {
  const { size, rawSize, scale } = sizes;
  const half = new Float64Array(rawSize * size);
  const packed = new Float64Array((rawSize * (rawSize + 1)) / 2);
  for (let row = 0; row < rawSize; row++) {
    const start = row * size;
    for (let k = 0; k < size; k++) {
      const weight = map[start + k] * scale;
      if (weight === 0) continue;
      for (let column = 0; column < size; column++) half[start + column] += weight * covariance[k * size + column];
    }
  }
  let at = 0;
  for (let row = 0; row < rawSize; row++) {
    for (let column = 0; column <= row; column++) {
      let sum = 0;
      for (let k = 0; k < size; k++) sum += half[row * size + k] * map[column * size + k];
      packed[at++] = sum;
    }
  }
  return packed;
}
