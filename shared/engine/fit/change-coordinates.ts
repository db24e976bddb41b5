import { stridedProduct } from "../linalg/strided-product";
import type { TermCoordinates } from "../penalty/term-transform";

/** Number of columns a term's transform gives. */
export const coordinateWidth = ({ unpenalised, penalised }: TermCoordinates): number => unpenalised + penalised;

/**
 * out = block x T: each row of raw columns becomes a row of coordinates, in the order of the transform's columns.
 *
 * @param block row-major rows x rawWidth. Not changed.
 * @param out receives rows x coordinates.
 * @example transformColumns(raw, 8, term.coordinates, half);
 */
export function transformColumns(block: Float64Array, rows: number, to: TermCoordinates, out: Float64Array): void {
  const { transform, rawWidth } = to;
  if (transform.form === "scaled") scale(block, rows, transform.factor, out);
  else if (transform.form === "without") {
    let at = 0;
    for (let row = 0; row < rows; row++) {
      const from = row * rawWidth;
      for (let k = 0; k < rawWidth; k++) if (k !== transform.leftOut) out[at++] = block[from + k];
    }
  } else if (transform.form === "dense") {
    const left = { values: block, at: 0, rows, inner: rawWidth, rowStep: rawWidth, innerStep: 1 };
    stridedProduct(left, { values: transform.matrix, at: 0, columns: coordinateWidth(to) }, { values: out, at: 0, lowerOnly: false });
  } else {
    const { matrix, rows: length, columns, count } = transform;
    if (length === 1 && columns === 1) scale(block, rows * count, matrix[0], out);
    else rowsTimes(block, out, { rows: rows * count, length, columns, matrix });
  }
}

/** Rows of `length` values times a matrix of `length` x `columns`. */
function rowsTimes(
  block: Float64Array, out: Float64Array, by: { rows: number; length: number; columns: number; matrix: Float64Array },
): void {
  const { rows, length, columns, matrix } = by;
  for (let row = 0; row < rows; row++) {
    const from = row * length;
    const to = row * columns;
    for (let column = 0; column < columns; column++) out[to + column] = 0;
    for (let k = 0; k < length; k++) {
      const value = block[from + k];
      if (value === 0) continue;
      const start = k * columns;
      for (let column = 0; column < columns; column++) out[to + column] += value * matrix[start + column];
    }
  }
}

function scale(values: Float64Array, count: number, factor: number, out: Float64Array): void {
  for (let at = 0; at < count; at++) out[at] = values[at] * factor;
}

/**
 * out = T' x block: raw rows x columns become coordinates x columns.
 *
 * @param block row-major rawWidth x columns. Not changed.
 * @param lowerOnly whether the result is known to be symmetric, so that its lower triangle is enough.
 * @example transformRows(half, 11, term.coordinates, raw);
 */
export function transformRows(block: Float64Array, columns: number, to: TermCoordinates, out: Float64Array, lowerOnly = false): void {
  const { transform, rawWidth } = to;
  if (transform.form === "scaled") scale(block, columns, transform.factor, out);
  else if (transform.form === "without") {
    let row = 0;
    for (let k = 0; k < rawWidth; k++) {
      if (k === transform.leftOut) continue;
      for (let column = 0; column < columns; column++) out[row * columns + column] = block[k * columns + column];
      row++;
    }
  } else if (transform.form === "dense") {
    const width = coordinateWidth(to);
    const left = { values: transform.matrix, at: 0, rows: width, inner: rawWidth, rowStep: 1, innerStep: width };
    stridedProduct(left, { values: block, at: 0, columns }, { values: out, at: 0, lowerOnly });
  } else {
    const { matrix, rows, columns: width, count } = transform;
    if (rows === 1 && width === 1) scale(block, count * columns, matrix[0], out);
    else {
      const left = { values: matrix, at: 0, rows: width, inner: rows, rowStep: 1, innerStep: width };
      for (let level = 0; level < count; level++) {
        stridedProduct(left, { values: block, at: level * rows * columns, columns }, { values: out, at: level * width * columns, lowerOnly: false });
      }
    }
  }
}
