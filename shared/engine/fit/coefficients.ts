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

/**
 * (X'WX + S)^-1 in fitting coordinates, row-major; zero for dropped columns. With K = A_00^-1 A_0q its blocks are
 * A_00^-1 + K H^-1 K', -K H^-1 and H^-1 (Golub & Van Loan 1996, section 3.2, partitioned inverse). O(size^3).
 */
export function coordinateCovariance(reduced: ReducedSystem, state: LikelihoodState): Float64Array {
  const { unpenalised, size, factor, dropped } = reduced;
  const all = unpenalised + size;
  const covariance = new Float64Array(all * all);
  const inverse = new Float64Array(unpenalised * unpenalised);
  invertFactored(factor.slice(), unpenalised, inverse);
  for (const { column } of dropped) inverse[column * unpenalised + column] = 0;
  const back = backSolvedCross(reduced);
  const spread = new Float64Array(size);
  for (let row = 0; row < unpenalised; row++) {
    spread.fill(0);
    for (let k = 0; k < size; k++) {
      const weight = back[row * size + k];
      for (let column = 0; column < size; column++) spread[column] += weight * state.inverse[k * size + column];
    }
    for (let column = 0; column < unpenalised; column++) {
      let sum = inverse[row * unpenalised + column];
      for (let k = 0; k < size; k++) sum += spread[k] * back[column * size + k];
      covariance[row * all + column] = sum;
    }
    for (let column = 0; column < size; column++) {
      covariance[row * all + unpenalised + column] = -spread[column];
      covariance[(unpenalised + column) * all + row] = -spread[column];
    }
  }
  for (let row = 0; row < size; row++) {
    covariance.set(state.inverse.subarray(row * size, (row + 1) * size), (unpenalised + row) * all + unpenalised);
  }
  return covariance;
}

/** K = A_00^-1 A_0q = L^-T (L^-1 A_0q), row-major unpenalised x size. */
function backSolvedCross({ unpenalised, size, factor, cross }: ReducedSystem): Float64Array {
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

/**
 * The linear map from fitting coordinates to coefficients, kept by rows without its zeros: row r has
 * `values[k]` in `columns[k]` for k from `starts[r]` to `starts[r + 1]`.
 */
export type CoefficientMap = { rows: number; starts: Int32Array; columns: Int32Array; values: Float64Array };

/** Each term by its own transform, each curve less its mean over the rows, the means moved to the intercept. */
export function coefficientMap(design: Design): CoefficientMap {
  const dense = denseMap(design);
  const { size, rawSize } = design;
  const starts = new Int32Array(rawSize + 1);
  const columns = new Int32Array(rawSize * size);
  const values = new Float64Array(rawSize * size);
  let used = 0;
  for (let row = 0; row < rawSize; row++) {
    for (let column = 0; column < size; column++) {
      const value = dense[row * size + column];
      if (value === 0) continue;
      columns[used] = column;
      values[used++] = value;
    }
    starts[row + 1] = used;
  }
  return { rows: rawSize, starts, columns, values };
}

function denseMap(design: Design): Float64Array {
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
export function applyMap(map: CoefficientMap, coordinates: Float64Array): Float64Array {
  const { rows, starts, columns, values } = map;
  const coefficients = new Float64Array(rows);
  for (let row = 0; row < rows; row++) {
    let sum = 0;
    for (let k = starts[row]; k < starts[row + 1]; k++) sum += values[k] * coordinates[columns[k]];
    coefficients[row] = sum;
  }
  return coefficients;
}

/** map x covariance x map' x scale, packed lower triangle; the covariance is row-major size x size. */
export function mapCovariance(map: CoefficientMap, covariance: Float64Array, size: number, scale: number): Float64Array {
  const { rows, starts, columns, values } = map;
  const packed = new Float64Array((rows * (rows + 1)) / 2);
  const half = new Float64Array(size);
  let at = 0;
  for (let row = 0; row < rows; row++) {
    half.fill(0);
    for (let k = starts[row]; k < starts[row + 1]; k++) {
      const weight = values[k] * scale;
      const from = columns[k] * size;
      for (let column = 0; column < size; column++) half[column] += weight * covariance[from + column];
    }
    for (let other = 0; other <= row; other++) {
      let sum = 0;
      for (let k = starts[other]; k < starts[other + 1]; k++) sum += values[k] * half[columns[k]];
      packed[at++] = sum;
    }
  }
  return packed;
}
