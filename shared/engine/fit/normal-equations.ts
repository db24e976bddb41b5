import { crossProduct, groupSquare, isSwapped } from "../linalg/cross-products";
import { addTransposeTimes, paddedWidth } from "../linalg/sparse-rows";
import { coordinateWidth, transformColumns, transformRows } from "./change-coordinates";
import type { Design, DesignGroups, DesignTerm } from "./design";

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

/** The same for groups: per group X_g'WX_g (both triangles), X_g'WX_shared and X_g'Wz, one after the other. */
export type GroupEquations = { count: number; size: number; own: Float64Array; cross: Float64Array; vector: Float64Array };

/** Arrays reused from one working model to the next; what they hold is overwritten by each call. */
export type Scratch = { raw: Float64Array; half: Float64Array; weighted: Float64Array; rawVector: Float64Array };

/** @example const scratch = createScratch(design); */
export function createScratch(design: Design): Scratch {
  const widths = [...design.parts, ...(design.groups?.parts ?? [])].map(({ rows }) => paddedWidth(rows));
  const widest = Math.max(...widths);
  const square = Math.max(design.widest * widest, squareOfGroups(design.groups));
  return {
    raw: new Float64Array(square),
    half: new Float64Array(square),
    weighted: new Float64Array(design.rowCount),
    rawVector: new Float64Array(widest),
  };
}

function squareOfGroups(groups: DesignGroups | null): number {
  if (groups === null) return 0;
  const widest = Math.max(...groups.parts.map(ownWidth));
  return Math.max(groups.count, 2) * widest * widest;
}

/** Raw columns of one group of a grouped term. */
const ownWidth = ({ coordinates }: DesignTerm): number => (coordinates.transform.form === "blocks" ? coordinates.transform.rows : 1);

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
  const target = { weights, scratch, matrix, size };
  for (let a = 0; a < parts.length; a++) {
    for (let b = 0; b <= a; b++) addPair(parts[a], parts[b], target);
  }
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

type PairTarget = { weights: Float64Array; scratch: Scratch; matrix: Float64Array; size: number };

function addPair(one: DesignTerm, other: DesignTerm, target: PairTarget): void {
  const [left, right] = isSwapped(one.rows, other.rows) ? [other, one] : [one, other];
  const { raw, half } = target.scratch;
  const { matrix, size } = target;
  crossProduct(left.rows, right.rows, target.weights, raw);
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

/** T'X'W(z - shift) of one term, left in `scratch.half`. */
function transformedVector(part: DesignTerm, { rawVector, half, weighted }: Scratch): Float64Array {
  rawVector.fill(0);
  addTransposeTimes(part.rows, weighted, rawVector, 0);
  transformRows(rawVector, 1, part.coordinates, half);
  return half;
}

function groupEquations(
  design: Design, groups: DesignGroups, rows: { weights: Float64Array; scratch: Scratch },
): GroupEquations {
  const { count, size, parts } = groups;
  const out: GroupEquations = {
    count, size,
    own: new Float64Array(count * size * size),
    cross: new Float64Array(count * size * design.size),
    vector: new Float64Array(count * size),
  };
  for (let a = 0; a < parts.length; a++) {
    for (let b = 0; b <= a; b++) addOwnPair(parts[a], parts[b], { ...rows, out });
    for (const shared of design.parts) addCrossPair(parts[a], shared, { ...rows, out, sharedSize: design.size });
    const vector = transformedVector(parts[a], rows.scratch);
    const { positions } = parts[a];
    for (let group = 0; group < count; group++) {
      for (let k = 0; k < positions.length; k++) out.vector[group * size + positions[k]] = vector[group * positions.length + k];
    }
  }
  return out;
}

type GroupTarget = { weights: Float64Array; scratch: Scratch; out: GroupEquations };

/** Diagonal blocks of two terms on the same groups. */
function addOwnPair(left: DesignTerm, right: DesignTerm, target: GroupTarget): void {
  const { raw, half } = target.scratch;
  const { count, size, own } = target.out;
  groupSquare({ rows: left.rows, width: ownWidth(left) }, { rows: right.rows, width: ownWidth(right) }, { count, weights: target.weights }, raw);
  const leftWidth = ownWidth(left);
  const columns = right.positions.length;
  const [ofLeft, ofRight] = [oneGroupOf(left), oneGroupOf(right)];
  const square = leftWidth * ownWidth(right);
  for (let group = 0; group < count; group++) {
    const block = raw.subarray(group * square, (group + 1) * square);
    transformColumns(block, leftWidth, ofRight, half);
    const result = half.subarray(leftWidth * columns);
    transformRows(half, columns, ofLeft, result);
    for (let i = 0; i < left.positions.length; i++) {
      for (let j = 0; j < columns; j++) {
        const value = result[i * columns + j];
        own[(group * size + left.positions[i]) * size + right.positions[j]] = value;
        own[(group * size + right.positions[j]) * size + left.positions[i]] = value;
      }
    }
  }
}

/** A grouped term's coordinates as if it had one group only. */
function oneGroupOf(part: DesignTerm): DesignTerm["coordinates"] {
  const { transform } = part.coordinates;
  if (transform.form !== "blocks") return part.coordinates;
  return { ...part.coordinates, transform: { ...transform, count: 1 }, rawWidth: transform.rows, penalised: transform.columns };
}

function addCrossPair(grouped: DesignTerm, shared: DesignTerm, target: GroupTarget & { sharedSize: number }): void {
  const swapped = isSwapped(grouped.rows, shared.rows);
  const [left, right] = swapped ? [shared, grouped] : [grouped, shared];
  const { raw, half } = target.scratch;
  crossProduct(left.rows, right.rows, target.weights, raw);
  const columns = coordinateWidth(right.coordinates);
  transformColumns(raw, left.coordinates.rawWidth, right.coordinates, half);
  transformRows(half, columns, left.coordinates, raw);
  const { size, count, cross } = target.out;
  const own = grouped.positions.length;
  for (let group = 0; group < count; group++) {
    for (let i = 0; i < own; i++) {
      const at = (group * size + grouped.positions[i]) * target.sharedSize;
      const from = group * own + i;
      for (let j = 0; j < shared.positions.length; j++) {
        cross[at + shared.positions[j]] = swapped ? raw[j * columns + from] : raw[from * columns + j];
      }
    }
  }
}
