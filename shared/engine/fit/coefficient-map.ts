import type { LevelledSmoothBasis } from "../types";
import type { Design, DesignTerm, LearntTerm } from "./design";

/**
 * The linear map from fitting coordinates to coefficients, kept by rows without its zeros: row r has
 * `values[k]` in `columns[k]` for k from `starts[r]` to `starts[r + 1]`.
 */
export type CoefficientMap = { rows: number; starts: Int32Array; columns: Int32Array; values: Float64Array };

/**
 * Each shared term by its own transform, each curve less its mean over the rows; the means move to the intercept, those of a
 * curve per level to the levels' factor.
 *
 * @example applyMap(coefficientMap(design), coordinates); // coefficients
 */
export function coefficientMap(design: Design): CoefficientMap {
  const dense = denseMap(design);
  const { size, sharedRawSize: rawSize } = design;
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
  const { size, sharedRawSize } = design;
  const map = new Float64Array(sharedRawSize * size);
  map[0] = 1;
  for (const term of design.terms) {
    if (term.design.groupFirst !== null) continue;
    writePart(term.design, map, size);
    if (term.basis.kind === "levelled-smooth") centreLevels(design, { ...term, basis: term.basis }, map);
    else if ("centring" in term.basis) centre(term.design, { first: 0, centring: term.basis.centring, toRows: [0] }, { map, size });
  }
  return map;
}

/** Coefficients rawFirst + first ... less their mean by `centring`, which is added to the rows `toRows`. */
function centre(
  part: DesignTerm, by: { first: number; centring: Float64Array; toRows: number[] }, of: { map: Float64Array; size: number },
): void {
  const { map, size } = of;
  const { first, centring, toRows } = by;
  const start = part.rawFirst + first;
  for (let own = 0; own < part.positions.length; own++) {
    const column = part.positions[own];
    let mean = 0;
    for (let k = 0; k < centring.length; k++) mean += centring[k] * map[(start + k) * size + column];
    if (mean === 0) continue;
    for (let k = 0; k < centring.length; k++) map[(start + k) * size + column] -= mean;
    for (const row of toRows) map[row * size + column] += mean;
  }
}

/** A level's mean belongs to its own factor level; the reference's to the intercept, and off every other level. */
function centreLevels(design: Design, term: LearntTerm & { basis: LevelledSmoothBasis }, map: Float64Array): void {
  const { basis } = term;
  const { size } = design;
  const factor = design.terms.find((other) => other.basis.kind === "factor" && other.basis.column === basis.by);
  if (factor?.basis.kind !== "factor") return;
  const { levels, reference } = factor.basis;
  basis.levels.forEach((level, at) => {
    const centring = basis.centring.subarray(at * basis.size, (at + 1) * basis.size);
    const own = factor.design.rawFirst + levels.indexOf(level);
    const part = term.design;
    if (level !== reference) return centre(part, { first: at * basis.size, centring, toRows: [own] }, { map, size });
    const before = map.slice(0, size);
    centre(part, { first: at * basis.size, centring, toRows: [0] }, { map, size });
    for (let column = 0; column < size; column++) {
      const moved = map[column] - before[column];
      if (moved === 0) continue;
      levels.forEach((name, k) => { if (name !== reference) map[(factor.design.rawFirst + k) * size + column] -= moved; });
    }
  });
}

function writePart(part: DesignTerm, map: Float64Array, size: number): void {
  const { transform, rawWidth } = part.coordinates;
  const { positions } = part;
  for (let k = 0; k < rawWidth; k++) {
    const row = (part.rawFirst + k) * size;
    if (transform.form === "scaled") map[row + positions[0]] = transform.factor;
    else if (transform.form === "dense") {
      for (let own = 0; own < positions.length; own++) map[row + positions[own]] = transform.matrix[k * positions.length + own];
    } else if (transform.form === "blocks") {
      const { rows, columns, matrix } = transform;
      const level = Math.floor(k / rows);
      for (let own = 0; own < columns; own++) map[row + positions[level * columns + own]] = matrix[(k % rows) * columns + own];
    } else if (k !== transform.leftOut) map[row + positions[k < transform.leftOut ? k : k - 1]] = 1;
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

/**
 * map x covariance x map' x scale, packed lower triangle; the covariance is row-major size x size, both triangles.
 */
export function mapCovariance(map: CoefficientMap, covariance: Float64Array, size: number, scale: number): Float64Array {
  const { rows, starts, columns, values } = map;
  const packed = new Float64Array((rows * (rows + 1)) / 2);
  const half = new Float64Array(size);
  let at = 0;
  for (let row = 0; row < rows; row++) {
    rowTimes(map, row, { covariance, scale }, half);
    for (let other = 0; other <= row; other++) {
      const end = starts[other + 1];
      let k = starts[other];
      let even = 0;
      let odd = 0;
      for (; k + 1 < end; k += 2) {
        even += values[k] * half[columns[k]];
        odd += values[k + 1] * half[columns[k + 1]];
      }
      packed[at++] = k < end ? even + odd + values[k] * half[columns[k]] : even + odd;
    }
  }
  return packed;
}

/** One row of the map times the covariance: the covariance's own rows lie together in memory, and are taken two at a time. */
function rowTimes({ starts, columns, values }: CoefficientMap, row: number, by: { covariance: Float64Array; scale: number }, out: Float64Array): void {
  const { covariance, scale } = by;
  const size = out.length;
  out.fill(0);
  const end = starts[row + 1];
  for (let k = starts[row]; k < end; k += 2) {
    const first = scale * values[k];
    const from = columns[k] * size;
    const second = k + 1 < end ? scale * values[k + 1] : 0;
    const beside = k + 1 < end ? columns[k + 1] * size : from;
    for (let column = 0; column < size; column++) out[column] += first * covariance[from + column] + second * covariance[beside + column];
  }
}
