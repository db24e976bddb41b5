/** Rows of numbers. */
type Matrix = number[][];

const sum = (values: readonly number[]): number => values.reduce((total, value) => total + value, 0);
const dot = (left: readonly number[], right: readonly number[]): number => sum(left.map((value, k) => value * right[k]));
export const times = (matrix: Matrix, vector: readonly number[]): number[] => matrix.map((row) => dot(row, vector));

/** Solves a small system by elimination with the largest pivot (Golub & Van Loan 1996, section 3.4). */
export function solvePlain(matrix: Matrix, right: readonly number[]): number[] {
  const rows = matrix.map((row, k) => [...row, right[k]]);
  for (let step = 0; step < rows.length; step++) {
    const pivot = rows.slice(step).reduce((best, row, k) => (Math.abs(row[step]) > Math.abs(rows[best][step]) ? step + k : best), step);
    [rows[step], rows[pivot]] = [rows[pivot], rows[step]];
    for (let row = step + 1; row < rows.length; row++) {
      const share = rows[row][step] / rows[step][step];
      rows[row] = rows[row].map((value, k) => value - share * rows[step][k]);
    }
  }
  const solution = new Array<number>(rows.length).fill(0);
  for (let row = rows.length - 1; row >= 0; row--) {
    const known = sum(solution.map((value, k) => (k > row ? value * rows[row][k] : 0)));
    solution[row] = (rows[row][rows.length] - known) / rows[row][row];
  }
  return solution;
}

/** The n x n operator of a local polynomial, row by row from its normal equations (Cleveland 1979). */
export function plainSmoother(x: readonly number[], weights: readonly number[], of: { span: number; degree: number }): Matrix {
  const neighbours = Math.floor(of.span * x.length + 1e-5);
  return x.map((at) => {
    const distance = x.map((value) => Math.abs(value - at));
    const reach = [...distance].sort((a, b) => a - b)[neighbours - 1];
    const kernel = distance.map((value, k) => (value < reach ? weights[k] * (1 - (value / reach) ** 3) ** 3 : 0));
    const powers = x.map((value) => Array.from({ length: of.degree + 1 }, (_, power) => ((value - at) / reach) ** power));
    const square = powers[0].map((_, a) => powers[0].map((__, b) => sum(powers.map((row, k) => kernel[k] * row[a] * row[b]))));
    const first = solvePlain(square, powers[0].map((_, a) => (a === 0 ? 1 : 0)));
    return powers.map((row, k) => kernel[k] * dot(row, first));
  });
}

type Backfit = { predictor: number[]; line: number[]; curves: number[][] };

const centred = (values: readonly number[], weights: readonly number[]): number[] => {
  const mean = dot(values, weights) / sum(weights);
  return values.map((value) => value - mean);
};

/**
 * Backfitting, cycle by cycle until it rests: columns by weighted least squares, each local regression by its n x n operator
 * on partial residuals less their mean (Hastie & Tibshirani 1990, section 5.3).
 */
export function plainBackfit(z: readonly number[], weights: readonly number[], of: { columns: Matrix; smoothers: Matrix[] }): Backfit {
  const mean = dot(z, weights) / sum(weights);
  const columns = of.columns.map((column) => centred(column, weights));
  const square = columns.map((left) => columns.map((right) => dot(left.map((value, k) => value * weights[k]), right)));
  let line = z.map(() => 0);
  let curves = of.smoothers.map(() => z.map(() => 0));
  for (let cycle = 0; cycle < 2000; cycle++) {
    const before = [line, ...curves];
    const left = z.map((value, k) => value - mean - sum(curves.map((curve) => curve[k])));
    const slopes = columns.length === 0 ? [] : solvePlain(square, columns.map((column) => dot(column.map((value, k) => value * weights[k]), left)));
    line = z.map((_, k) => sum(columns.map((column, j) => slopes[j] * column[k])));
    curves = [...curves];
    of.smoothers.forEach((smoother, at) => {
      const partial = z.map((value, k) => value - mean - line[k] - sum(curves.map((curve, j) => (j === at ? 0 : curve[k]))));
      curves[at] = times(smoother, centred(partial, weights));
    });
    const moved = Math.max(...[line, ...curves].map((part, j) => Math.max(...part.map((value, k) => Math.abs(value - before[j][k])))));
    if (moved < 1e-14) break;
  }
  return { predictor: z.map((_, k) => mean + line[k] + sum(curves.map((curve) => curve[k]))), line, curves };
}

/** The n x n matrix that takes a response to what `of` gives for it, which is linear in it. */
export function plainOperator(count: number, of: (z: number[]) => number[]): Matrix {
  const columns = Array.from({ length: count }, (_, k) => of(Array.from({ length: count }, (__, row) => (row === k ? 1 : 0))));
  return columns.map((_, row) => columns.map((column) => column[row]));
}

export const trace = (matrix: Matrix): number => sum(matrix.map((row, k) => row[k]));
