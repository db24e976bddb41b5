import { choleskyInPlace, invertFactored } from "../linalg/cholesky";
import { addProduct, denseProduct } from "../linalg/dense-product";
import { rowProducts } from "../linalg/tiles";
import type { GroupCovariance } from "../types";
import type { CoefficientMap } from "./coefficient-map";
import type { Design, DesignTerm } from "./design";
import type { LikelihoodState } from "./likelihood-state";

/**
 * Coefficients of every eliminated group: each term's matrix times the group's coordinates, written at the term's place.
 *
 * @param coordinates count x size. out the model's coefficients, changed from `sharedRawSize` on.
 */
export function applyGroupTransforms(design: Design, coordinates: Float64Array, out: Float64Array): void {
  const { groups } = design;
  if (groups === null) return;
  for (const part of groups.parts) {
    const { matrix, rows, columns } = blockOf(part);
    for (let group = 0; group < groups.count; group++) {
      for (let k = 0; k < rows; k++) {
        let sum = 0;
        for (let own = 0; own < columns; own++) sum += matrix[k * columns + own] * coordinates[group * groups.size + part.positions[own]];
        out[part.rawFirst + group * rows + k] = sum;
      }
    }
  }
}

function blockOf({ coordinates }: DesignTerm): { matrix: Float64Array; rows: number; columns: number } {
  const { transform } = coordinates;
  if (transform.form !== "blocks") throw new Error("A term on groups has blocks for its transform.");
  return transform;
}

/**
 * Covariance of the groups' coefficients in block-arrow form (see `GroupCovariance`): with T the terms' matrices of one
 * group, B their shared map and B+ its left inverse, link = T K_g B+ and own = scale x T (B_g + S_g)^-1 T'.
 *
 * @param state at level gradient, with groups.
 * @returns null for a model without groups.
 */
export function groupCovariance(design: Design, map: CoefficientMap, state: LikelihoodState, scale: number): GroupCovariance | null {
  const { groups } = design;
  const { arrow } = state;
  if (groups === null || arrow === null) return null;
  const transform = groupTransform(groups.parts, groups.size);
  const { rows } = transform;
  const inverse = leftInverse(map, design.size);
  const onCoefficients = new Float64Array(groups.count * rows * design.size);
  const own = new Float64Array((groups.count * rows * (rows + 1)) / 2);
  for (let group = 0; group < groups.count; group++) {
    const linkCoordinates = arrow.link.subarray(group * groups.size * design.size, (group + 1) * groups.size * design.size);
    addProduct(
      { values: transform.matrix, count: rows, width: groups.size }, { values: linkCoordinates, count: groups.size, width: design.size },
      1, onCoefficients.subarray(group * rows * design.size),
    );
    packOwn({ group, size: groups.size, transform, inner: arrow.inner, scale }, own.subarray((group * rows * (rows + 1)) / 2));
  }
  const link = new Float64Array(groups.count * rows * map.rows);
  rowProducts({ values: onCoefficients, count: groups.count * rows, width: design.size }, { values: inverse, count: map.rows, width: design.size }, link);
  const places = groups.parts.flatMap((part) => {
    const { rows: step } = blockOf(part);
    return Array.from({ length: step }, (_, k) => ({ first: part.rawFirst + k, step }));
  });
  return { count: groups.count, size: rows, first: places.map(({ first }) => first), step: places.map(({ step }) => step), link, own };
}

/** Block-diagonal over the terms: coefficients of one group = matrix x its coordinates. */
function groupTransform(parts: readonly DesignTerm[], size: number): { matrix: Float64Array; rows: number } {
  const rows = parts.reduce((sum, part) => sum + blockOf(part).rows, 0);
  const matrix = new Float64Array(rows * size);
  let first = 0;
  for (const part of parts) {
    const block = blockOf(part);
    for (let k = 0; k < block.rows; k++) {
      for (let own = 0; own < block.columns; own++) matrix[(first + k) * size + part.positions[own]] = block.matrix[k * block.columns + own];
    }
    first += block.rows;
  }
  return { matrix, rows };
}

/** B (B'B)^-1 of the shared map B, the transpose of its left inverse, row-major rows x size. */
function leftInverse(map: CoefficientMap, size: number): Float64Array {
  const { rows, starts, columns, values } = map;
  const square = new Float64Array(size * size);
  for (let row = 0; row < rows; row++) {
    for (let a = starts[row]; a < starts[row + 1]; a++) {
      for (let b = starts[row]; b < starts[row + 1]; b++) square[columns[a] * size + columns[b]] += values[a] * values[b];
    }
  }
  if (!choleskyInPlace(square, size)) throw new Error("The map from coordinates to coefficients has lost a column.");
  const inverse = new Float64Array(size * size);
  invertFactored(square, size, inverse);
  const out = new Float64Array(size * rows);
  for (let row = 0; row < rows; row++) {
    for (let a = starts[row]; a < starts[row + 1]; a++) {
      for (let k = 0; k < size; k++) out[row * size + k] += inverse[k * size + columns[a]] * values[a];
    }
  }
  return out;
}

function packOwn(
  of: { group: number; size: number; transform: { matrix: Float64Array; rows: number }; inner: Float64Array; scale: number }, out: Float64Array,
): void {
  const { group, size, transform: { matrix, rows }, inner, scale } = of;
  const block = inner.subarray(group * size * size, (group + 1) * size * size);
  const half = denseProduct({ values: matrix, count: rows, width: size }, { values: block, count: size, width: size });
  let at = 0;
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column <= row; column++) {
      let sum = 0;
      for (let k = 0; k < size; k++) sum += half[row * size + k] * matrix[column * size + k];
      out[at++] = sum * scale;
    }
  }
}
