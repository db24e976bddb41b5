/** A column that earlier ones reproduce, and which of them do. */
export type DroppedColumn = { column: number; dependsOn: number[] };

/** Share of a column's sum of squares that must be its own; below it, cross-products cannot tell it from rounding. */
export const ownShareNeeded = 1e-11;

/**
 * Cholesky factorisation that leaves out each column the earlier ones reproduce, in order: of two columns that
 * cannot be told apart the later one goes. A dropped column's row and column of L become those of the identity.
 * Source: Golub & Van Loan (1996), section 4.2.8, without the exchange of columns, so that the rule is the order.
 *
 * @param matrix cross-products, row-major size x size, lower triangle used; replaced by L.
 * @param known columns dropped by an earlier call on the same design (they are dropped again, and no others), or null to decide.
 * @returns the dropped columns in order.
 * @example choleskyDropping(Float64Array.of(1, 0, 2, 4), 2, null); // [{ column: 1, dependsOn: [0] }]
 */
export function choleskyDropping(matrix: Float64Array, size: number, known: readonly DroppedColumn[] | null): DroppedColumn[] {
  const dropped: DroppedColumn[] = known === null ? [] : [...known];
  const diagonal = new Float64Array(size);
  for (let row = 0; row < size; row++) {
    const start = row * size;
    const own = matrix[start + row];
    diagonal[row] = own;
    let pivot = own;
    for (let column = 0; column < row; column++) {
      let sum = matrix[start + column];
      for (let k = 0; k < column; k++) sum -= matrix[start + k] * matrix[column * size + k];
      sum /= matrix[column * size + column];
      matrix[start + column] = sum;
      pivot -= sum * sum;
    }
    const tooSmall = !(pivot > ownShareNeeded * own);
    if (known === null && tooSmall) dropped.push({ column: row, dependsOn: dependencies(matrix, size, row, diagonal) });
    if (dropped.some((entry) => entry.column === row)) clearColumn(matrix, size, row);
    else matrix[start + row] = Math.sqrt(Math.max(pivot, ownShareNeeded * own, Number.MIN_VALUE * 1e16));
  }
  return dropped;
}

/** Row and column become the identity's; entries below are still cross-products and vanish with their source. */
function clearColumn(matrix: Float64Array, size: number, column: number): void {
  for (let k = 0; k < column; k++) matrix[column * size + k] = 0;
  matrix[column * size + column] = 1;
  for (let row = column + 1; row < size; row++) matrix[row * size + column] = 0;
}

/** Earlier columns with weight in the combination that reproduces column `row`: solves L' x = l. */
function dependencies(matrix: Float64Array, size: number, row: number, diagonal: Float64Array): number[] {
  const weights = matrix.slice(row * size, row * size + row);
  for (let k = row - 1; k >= 0; k--) {
    weights[k] /= matrix[k * size + k];
    for (let earlier = 0; earlier < k; earlier++) weights[earlier] -= matrix[k * size + earlier] * weights[k];
  }
  const columns: number[] = [];
  for (let k = 0; k < row; k++) {
    if (Math.abs(weights[k]) * Math.sqrt(diagonal[k]) > 1e-6 * Math.sqrt(diagonal[row])) columns.push(k);
  }
  return columns;
}
