import fc from "fast-check";

/** Row-major rows x columns of whole sixteenths in [-2, 2): their sums of products are exact. */
export const matrixOf = (rows: number, columns: number) =>
  fc.array(fc.integer({ min: -32, max: 31 }), { minLength: rows * columns, maxLength: rows * columns })
    .map((values) => Float64Array.from(values, (value) => value / 16));

/** left (rows x inner) times right (inner x columns), by three plain loops. */
export function times(left: Float64Array, right: Float64Array, shape: { rows: number; inner: number; columns: number }): Float64Array {
  const out = new Float64Array(shape.rows * shape.columns);
  for (let i = 0; i < shape.rows; i++) {
    for (let j = 0; j < shape.columns; j++) {
      for (let k = 0; k < shape.inner; k++) out[i * shape.columns + j] += left[i * shape.inner + k] * right[k * shape.columns + j];
    }
  }
  return out;
}

export const transposed = (matrix: Float64Array, rows: number, columns: number): Float64Array =>
  Float64Array.from({ length: rows * columns }, (_, at) => matrix[(at % rows) * columns + Math.floor(at / rows)]);

/** A'A + I, of a random A: symmetric and well away from singular. */
export const positiveDefinite = (size: number) => matrixOf(size, size).map((matrix) => {
  const square = times(transposed(matrix, size, size), matrix, { rows: size, inner: size, columns: size });
  for (let k = 0; k < size; k++) square[k * size + k] += 1;
  return square;
});

/** Zero above the diagonal. */
export const lowerPart = (matrix: Float64Array, size: number): Float64Array =>
  matrix.map((value, at) => (at % size > Math.floor(at / size) ? 0 : value));
