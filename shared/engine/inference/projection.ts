import { choleskyDropping } from "../linalg/dropping-cholesky";
import { packedIndex } from "../linalg/packed-symmetric";
import type { ModelInformation } from "../types";
import { unpacked } from "./posterior";

/** A vector over all coordinates: the shared ones, and count x size of the groups. */
export type CoordinateVector = { shared: Float64Array; grouped: Float64Array };

/** Coordinates to project on, shared ones and those of each group's block, with a ridge on some (0: none). */
export type Target = { shared: { position: number; ridge: number }[]; grouped: { position: number; ridge: number }[] };

/**
 * X'WX times a vector over all coordinates. O(size^2 + groups x group size x size).
 *
 * @example const gradient = informationTimes(information, estimates); // X'W eta
 */
export function informationTimes({ shared, size, groups }: ModelInformation, vector: CoordinateVector): CoordinateVector {
  const out: CoordinateVector = { shared: new Float64Array(size), grouped: new Float64Array(vector.grouped.length) };
  for (let row = 0; row < size; row++) for (let k = 0; k < size; k++) out.shared[row] += shared[packedIndex(row, k)] * vector.shared[k];
  if (groups === null) return out;
  const width = groups.size;
  const packed = (width * (width + 1)) / 2;
  for (let line = 0; line < groups.count * width; line++) {
    const group = Math.floor(line / width);
    let sum = 0;
    for (let k = 0; k < size; k++) {
      const value = groups.cross[line * size + k];
      sum += value * vector.shared[k];
      out.shared[k] += value * vector.grouped[line];
    }
    for (let k = 0; k < width; k++) sum += groups.own[group * packed + packedIndex(line % width, k)] * vector.grouped[group * width + k];
    out.grouped[line] = sum;
  }
  return out;
}

/**
 * Sum of squares of a function f's projection on other columns: u'(X'WX + ridges)^- u with u = X'Wf. Columns that earlier
 * ones reproduce are passed over. With ridges it is what the others reproduce at the price of the ridge.
 *
 * @param gradient u, over all coordinates. O(columns^3 + groups x group columns x columns^2).
 * @example projectedSquares(information, informationTimes(information, f), others);
 */
export function projectedSquares(information: ModelInformation, gradient: CoordinateVector, { shared, grouped }: Target): number {
  const { size, groups } = information;
  const columns = shared.length;
  const matrix = new Float64Array(columns * columns);
  for (let row = 0; row < columns; row++) {
    for (let k = 0; k <= row; k++) matrix[row * columns + k] = information.shared[packedIndex(shared[row].position, shared[k].position)];
    matrix[row * columns + row] += shared[row].ridge;
  }
  const right = Float64Array.from(shared, ({ position }) => gradient.shared[position]);
  let squares = 0;
  if (groups !== null && grouped.length > 0) {
    const packed = (groups.size * (groups.size + 1)) / 2;
    const width = grouped.length;
    for (let group = 0; group < groups.count; group++) {
      const whole = unpacked(groups.own, groups.size, group * packed);
      const own = new Float64Array(width * width);
      const border = new Float64Array(width * (columns + 1));
      grouped.forEach(({ position, ridge }, row) => {
        grouped.forEach((other, k) => { own[row * width + k] = whole[position * groups.size + other.position] + (k === row ? ridge : 0); });
        const line = group * groups.size + position;
        shared.forEach((to, k) => { border[row * (columns + 1) + k] = groups.cross[line * size + to.position]; });
        border[row * (columns + 1) + columns] = gradient.grouped[line];
      });
      solveRows(own, border, width, columns + 1);
      squares += takeBorder(border, width, { matrix, right });
    }
  }
  const border = right.slice();
  solveRows(matrix, border, columns, 1);
  return squares + border.reduce((sum, value) => sum + value * value, 0);
}

/** Replaces the rows of `border` by L^-1 border, matrix = L L'; zero rows for dropped columns. */
function solveRows(matrix: Float64Array, border: Float64Array, size: number, columns: number): void {
  const dropped = new Set(choleskyDropping(matrix, size, null).map(({ column }) => column));
  for (let row = 0; row < size; row++) {
    for (let column = 0; column < columns; column++) {
      let sum = border[row * columns + column];
      for (let k = 0; k < row; k++) sum -= matrix[row * size + k] * border[k * columns + column];
      border[row * columns + column] = dropped.has(row) ? 0 : sum / matrix[row * size + row];
    }
  }
}

/** Takes a group's solved border from the shared system; returns the squares it explains by itself. */
function takeBorder(border: Float64Array, width: number, { matrix, right }: { matrix: Float64Array; right: Float64Array }): number {
  const columns = right.length;
  let squares = 0;
  for (let row = 0; row < width; row++) {
    const start = row * (columns + 1);
    const own = border[start + columns];
    squares += own * own;
    for (let i = 0; i < columns; i++) {
      right[i] -= border[start + i] * own;
      for (let k = 0; k <= i; k++) matrix[i * columns + k] -= border[start + i] * border[start + k];
    }
  }
  return squares;
}
