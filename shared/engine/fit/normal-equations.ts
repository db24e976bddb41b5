import { crossProduct, isSwapped } from "../linalg/cross-products";
import { addTransposeTimes } from "../linalg/sparse-rows";
import type { TermCoordinates } from "../penalty/term-transform";
import type { Design, DesignTerm } from "./design";

/** X'WX and X'Wz in fitting coordinates. z is taken less its weighted mean `shift`, which keeps digits. */
export type NormalEquations = {
  /** Row-major size x size, lower triangle. */
  matrix: Float64Array;
  vector: Float64Array;
  /** z'Wz about the shift. */
  total: number;
  shift: number;
};

/** Arrays reused from one working model to the next. */
export type Scratch = { raw: Float64Array; half: Float64Array; weighted: Float64Array; rawVector: Float64Array };

/** @example const scratch = createScratch(design); */
export function createScratch(design: Design): Scratch {
  const square = design.widest * design.widest;
  return {
    raw: new Float64Array(square),
    half: new Float64Array(square),
    weighted: new Float64Array(design.rowCount),
    rawVector: new Float64Array(design.widest),
  };
}

/**
 * Builds X'WX and X'Wz by a kernel per pair of terms on their raw columns, and turns each block into fitting
 * coordinates afterwards. O(n x pairs), plus small products that do not depend on n.
 *
 * @param response working response z, length n. Not changed.
 * @param weights working weights, length n, above zero. Not changed.
 * @example const equations = normalEquations(design, { response, weights }, createScratch(design));
 */
export function normalEquations(
  design: Design, rows: { response: Float64Array; weights: Float64Array }, scratch: Scratch,
): NormalEquations {
  const { parts, size } = design;
  const { response, weights } = rows;
  const matrix = new Float64Array(size * size);
  for (let a = 0; a < parts.length; a++) {
    for (let b = 0; b <= a; b++) addPair(parts[a], parts[b], { weights, scratch, matrix, size });
  }
  const { weighted } = scratch;
  const shift = weightedMean(response, weights);
  let total = 0;
  for (let row = 0; row < response.length; row++) {
    const value = response[row] - shift;
    weighted[row] = weights[row] * value;
    total += weighted[row] * value;
  }
  const vector = new Float64Array(size);
  for (const part of parts) addVector(part, scratch, vector);
  return { matrix, vector, total, shift };
}

function weightedMean(values: Float64Array, weights: Float64Array): number {
  let sum = 0;
  let weight = 0;
  for (let row = 0; row < values.length; row++) {
    sum += weights[row] * values[row];
    weight += weights[row];
  }
  return sum / weight;
}

type PairTarget = { weights: Float64Array; scratch: Scratch; matrix: Float64Array; size: number };

function addPair(one: DesignTerm, other: DesignTerm, target: PairTarget): void {
  const [left, right] = isSwapped(one.rows, other.rows) ? [other, one] : [one, other];
  const { raw, half } = target.scratch;
  crossProduct(left.rows, right.rows, target.weights, raw);
  const columns = right.coordinates.unpenalised + right.coordinates.penalised;
  const rows = left.coordinates.unpenalised + left.coordinates.penalised;
  transformColumns(raw, left.coordinates.rawWidth, right.coordinates, half);
  transformRows(half, columns, left.coordinates, raw);
  for (let i = 0; i < rows; i++) {
    const row = coordinateAt(left, i);
    for (let j = 0; j < columns; j++) {
      const column = coordinateAt(right, j);
      target.matrix[row >= column ? row * target.size + column : column * target.size + row] = raw[i * columns + j];
    }
  }
}

function addVector(part: DesignTerm, scratch: Scratch, vector: Float64Array): void {
  const { rawVector, half, weighted } = scratch;
  rawVector.fill(0);
  addTransposeTimes(part.rows, weighted, rawVector, 0);
  transformRows(rawVector, 1, part.coordinates, half);
  const count = part.coordinates.unpenalised + part.coordinates.penalised;
  for (let k = 0; k < count; k++) vector[coordinateAt(part, k)] = half[k];
}

/** Where a term's own coordinate stands among all. */
export const coordinateAt = (part: DesignTerm, own: number): number =>
  own < part.coordinates.unpenalised ? part.unpenalisedFirst + own : part.penalisedFirst + own - part.coordinates.unpenalised;

/** out = block x T: rows x raw columns become rows x coordinates. */
function transformColumns(block: Float64Array, rows: number, to: TermCoordinates, out: Float64Array): void {
  const { transform, rawWidth } = to;
  const width = to.unpenalised + to.penalised;
  if (transform.form === "scaled") {
    for (let at = 0; at < rows; at++) out[at] = block[at] * transform.factor;
  } else if (transform.form === "without") {
    for (let row = 0; row < rows; row++) {
      let at = row * width;
      for (let k = 0; k < rawWidth; k++) if (k !== transform.leftOut) out[at++] = block[row * rawWidth + k];
    }
  } else {
    const { matrix } = transform;
    out.fill(0, 0, rows * width);
    for (let row = 0; row < rows; row++) {
      const start = row * width;
      for (let k = 0; k < rawWidth; k++) {
        const value = block[row * rawWidth + k];
        if (value === 0) continue;
        for (let column = 0; column < width; column++) out[start + column] += value * matrix[k * width + column];
      }
    }
  }
}

/** out = T' x block: raw rows x columns become coordinates x columns. */
function transformRows(block: Float64Array, columns: number, to: TermCoordinates, out: Float64Array): void {
  const { transform, rawWidth } = to;
  const width = to.unpenalised + to.penalised;
  if (transform.form === "scaled") {
    for (let at = 0; at < columns; at++) out[at] = block[at] * transform.factor;
  } else if (transform.form === "without") {
    let row = 0;
    for (let k = 0; k < rawWidth; k++) {
      if (k === transform.leftOut) continue;
      for (let column = 0; column < columns; column++) out[row * columns + column] = block[k * columns + column];
      row++;
    }
  } else {
    const { matrix } = transform;
    out.fill(0, 0, width * columns);
    for (let k = 0; k < rawWidth; k++) {
      for (let row = 0; row < width; row++) {
        const value = matrix[k * width + row];
        for (let column = 0; column < columns; column++) out[row * columns + column] += value * block[k * columns + column];
      }
    }
  }
}
