import { crossProduct, isSwapped } from "../linalg/cross-products";
import { coordinateWidth, transformColumns, transformRows } from "./change-coordinates";
import type { Design, DesignTerm } from "./design";
import { transformedVector } from "./equation-scratch";
import type { Scratch } from "./equation-scratch";
import { groupEquations } from "./group-equations";
import type { GroupEquations } from "./group-equations";

/** X'WX and X'Wz in fitting coordinates. z is taken less its weighted mean `shift`, which keeps digits. */
export type NormalEquations = {
  /** Row-major size x size over the shared coordinates, lower triangle. */
  matrix: Float64Array;
  vector: Float64Array;
  groups: GroupEquations | null;
  /** z'Wz about the shift. */
  total: number;
  shift: number;
};

type Rows = { response: Float64Array; weights: Float64Array };

/**
 * Builds X'WX and X'Wz by a kernel per pair of terms on their raw columns, and turns each block into fitting
 * coordinates afterwards. O(n x pairs), plus small products that do not depend on n.
 *
 * @param rows.response working response z, length n. Not changed.
 * @param rows.weights working weights, length n, above zero. Not changed.
 * @example const equations = normalEquations(design, { response, weights }, createScratch(design));
 */
export function normalEquations(design: Design, rows: Rows, scratch: Scratch): NormalEquations {
  const { parts, size } = design;
  const { response, weights } = rows;
  const matrix = new Float64Array(size * size);
  addSharedPairs(parts, { weights, scratch, matrix, size, partition: parts.find(isPartition) ?? null });
  const shift = weightedMean(response, weights);
  const total = centredResponse({ response, weights, shift }, scratch.weighted);
  const vector = new Float64Array(size);
  for (const part of parts) {
    const own = transformedVector(part, scratch);
    for (let k = 0; k < part.positions.length; k++) vector[part.positions[k]] = own[k];
  }
  const groups = design.groups === null ? null : groupEquations(design, design.groups, { weights, scratch });
  return { matrix, vector, groups, total, shift };
}

/** Fills `weighted` with W(z - shift) and returns its product with z - shift. */
function centredResponse(rows: { response: Float64Array; weights: Float64Array; shift: number }, weighted: Float64Array): number {
  const { response, weights, shift } = rows;
  let total = 0;
  for (let row = 0; row < response.length; row++) {
    const value = response[row] - shift;
    weighted[row] = weights[row] * value;
    total += weighted[row] * value;
  }
  return total;
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

/** Whether every row lies in one of a term's columns, with value 1: the columns then sum to the intercept's. */
const isPartition = ({ rows }: DesignTerm): boolean => rows.storage === "index" && rows.values === null;

type PairTarget = { weights: Float64Array; scratch: Scratch; matrix: Float64Array; size: number; partition: DesignTerm | null };

/** The intercept comes first. Beside a partition its products need no pass over the rows: they are sums of the partition's. */
function addSharedPairs(parts: readonly DesignTerm[], target: PairTarget): void {
  for (let a = 0; a < parts.length; a++) {
    for (let b = target.partition === null ? 0 : 1; b <= a; b++) addPair(parts[a], parts[b], target);
  }
}

function addPair(one: DesignTerm, other: DesignTerm, target: PairTarget): void {
  const [left, right] = isSwapped(one.rows, other.rows) ? [other, one] : [one, other];
  const { raw, half } = target.scratch;
  const { matrix, size } = target;
  crossProduct(left.rows, right.rows, target.weights, raw);
  if (left === target.partition || right === target.partition) addToIntercept(left, right, target);
  const columns = coordinateWidth(right.coordinates);
  transformColumns(raw, left.coordinates.rawWidth, right.coordinates, half);
  transformRows(half, columns, left.coordinates, raw, one === other);
  for (let i = 0; i < left.positions.length; i++) {
    const row = left.positions[i];
    const end = one === other ? i + 1 : columns;
    for (let j = 0; j < end; j++) {
      const column = right.positions[j];
      matrix[row >= column ? row * size + column : column * size + row] = raw[i * columns + j];
    }
  }
}

/** Products of the intercept with a term from those of the partition with it, which `scratch.raw` holds. */
function addToIntercept(left: DesignTerm, right: DesignTerm, { scratch, matrix, size, partition }: PairTarget): void {
  const { raw, half, rawVector } = scratch;
  const isLeft = left === partition;
  const columns = right.rows.width;
  rawVector.fill(0);
  let total = 0;
  for (let i = 0; i < left.rows.width; i++) {
    for (let j = 0; j < columns; j++) {
      const value = raw[i * columns + j];
      rawVector[isLeft ? j : i] += value;
      total += value;
    }
  }
  const { coordinates, positions } = isLeft ? right : left;
  transformRows(rawVector, 1, coordinates, half);
  for (let k = 0; k < positions.length; k++) matrix[positions[k] * size] = half[k];
  if (left === right) matrix[0] = total;
}
