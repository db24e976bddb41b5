import type { SmoothTerm, TermSpec } from "@shared/engine";
import { Matrix, inverse } from "ml-matrix";

/** A term's columns over the rows and its penalties, multipliers included, written from the definitions without regard to cost. */
export type PlainTerm = { columns: Matrix; penalties: Matrix[]; unpenalised: number };

type Rows = Record<string, readonly (number | string)[]>;
const numbersOf = (rows: Rows, name: string): number[] => rows[name].map(Number);
const levelsOf = (values: readonly (string | number)[]): string[] => [...new Set(values.map(String))].sort();

/** Value at x of the B-spline of a degree on knots k to k + degree + 1, by Cox and de Boor's recursion; 0 / 0 is 0. */
export function spline(x: number, knots: readonly number[], k: number, degree = 3): number {
  if (degree === 0) return x >= knots[k] && x < knots[k + 1] ? 1 : 0;
  const part = (above: number, width: number) => (width === 0 ? 0 : above / width);
  return part(x - knots[k], knots[k + degree] - knots[k]) * spline(x, knots, k, degree - 1)
    + part(knots[k + degree + 1] - x, knots[k + degree + 1] - knots[k + 1]) * spline(x, knots, k + 1, degree - 1);
}

/** Splines on equally spaced knots over the range of `over`, widened by a thousandth at each end. */
export function splineColumns(x: readonly number[], size: number, over: readonly number[] = x): Matrix {
  const [least, most] = [Math.min(...over), Math.max(...over)];
  const lower = least - 0.001 * (most - least);
  const step = (1.002 * (most - least)) / (size - 3);
  const knots = Array.from({ length: size + 4 }, (_, k) => lower + step * (k - 3));
  return new Matrix(x.map((value) => Array.from({ length: size }, (_, k) => spline(value, knots, k))));
}

function circleColumns(x: readonly number[], size: number, [from, to]: [number, number]): Matrix {
  const step = (to - from) / size;
  const knots = Array.from({ length: 3 * size + 8 }, (_, k) => from + step * (k - size - 3));
  return new Matrix(x.map((value) => {
    const columns = new Array<number>(size).fill(0);
    for (let k = 0; k < 3 * size + 3; k++) columns[k % size] += spline(value, knots, k);
    return columns;
  }));
}

/** D'D of differences of an order, on a circle wrapped round. */
export function differences(size: number, order: 1 | 2, wraps = false): Matrix {
  const weights = order === 1 ? [-1, 1] : [1, -2, 1];
  const count = wraps ? size : size - order;
  const matrix = Matrix.zeros(count, size);
  for (let row = 0; row < count; row++) weights.forEach((weight, k) => matrix.set(row, (row + k) % size, matrix.get(row, (row + k) % size) + weight));
  return matrix.transpose().mmul(matrix);
}

/** Coefficients of curves whose mean over the rows is zero: the one of the largest share follows from the others. */
function centring(columns: Matrix): Matrix {
  const shares = Array.from({ length: columns.columns }, (_, k) => columns.getColumn(k).reduce((sum, value) => sum + value, 0));
  const last = shares.indexOf(Math.max(...shares));
  const others = shares.map((_, k) => k).filter((k) => k !== last);
  const matrix = Matrix.zeros(columns.columns, columns.columns - 1);
  others.forEach((k, column) => {
    matrix.set(k, column, 1);
    matrix.set(last, column, -shares[k] / shares[last]);
  });
  return matrix;
}

const centred = (columns: Matrix, penalty: Matrix, unpenalised: number): PlainTerm => {
  const free = centring(columns);
  return { columns: columns.mmul(free), penalties: [free.transpose().mmul(penalty).mmul(free)], unpenalised };
};

const timesRows = (columns: Matrix, by: readonly number[]): Matrix => new Matrix(columns.to2DArray().map((row, at) => row.map((value) => value * by[at])));
const indicators = (values: readonly string[], levels: readonly string[]): Matrix => new Matrix(values.map((value) => levels.map((level) => Number(level === value))));

/** Side by side. */
export function beside(blocks: readonly Matrix[]): Matrix {
  return new Matrix(blocks[0].to2DArray().map((_row, at) => blocks.flatMap((block) => block.getRow(at))));
}

/** On the diagonal, one after the other. */
function blockDiagonal(blocks: readonly Matrix[]): Matrix {
  const size = blocks.reduce((sum, block) => sum + block.rows, 0);
  const whole = Matrix.zeros(size, size);
  let at = 0;
  for (const block of blocks) {
    whole.setSubMatrix(block, at, at);
    at += block.rows;
  }
  return whole;
}

/** Knots at the ends and at quantiles; N_1 = x, N_k+1 = d_k - d_K-1 (Hastie, Tibshirani & Friedman 2009, equation 5.4). */
function naturalColumns(x: readonly number[], df: number): Matrix {
  const sorted = [...x].sort((left, right) => left - right);
  const knots = Array.from({ length: df + 1 }, (_, k) => {
    const place = ((x.length - 1) * k) / df;
    const below = Math.floor(place);
    return sorted[below] + (place - below) * (sorted[Math.min(below + 1, x.length - 1)] - sorted[below]);
  });
  const cube = (value: number) => Math.max(0, value) ** 3;
  const slope = (value: number, k: number) => (cube(value - knots[k]) - cube(value - knots[df])) / (knots[df] - knots[k]);
  return new Matrix(x.map((value) => [value, ...Array.from({ length: df - 1 }, (_, k) => slope(value, k) - slope(value, df - 1))]));
}

/** Row by row all products of two margins, each parametrised by its values at evenly spaced points over its range. */
function surfaceTerm(x: readonly number[], y: readonly number[], sizes: readonly number[], penalties: readonly number[]): PlainTerm {
  const [left, right] = [x, y].map((own, k) => {
    const columns = splineColumns(own, sizes[k]);
    const free = centring(columns);
    const points = Array.from({ length: sizes[k] - 1 }, (_, p) => Math.min(...own) + ((Math.max(...own) - Math.min(...own)) * p) / (sizes[k] - 2));
    const toValues = inverse(splineColumns(points, sizes[k], own).mmul(free));
    const frame = free.mmul(toValues);
    return { columns: columns.mmul(frame), penalty: frame.transpose().mmul(differences(sizes[k], 2)).mmul(frame) };
  });
  const columns = new Matrix(left.columns.to2DArray().map((row, at) => row.flatMap((value) => right.columns.getRow(at).map((other) => value * other))));
  const first = left.penalty.kroneckerProduct(Matrix.eye(sizes[1] - 1)).mul(penalties[0]);
  const second = Matrix.eye(sizes[0] - 1).kroneckerProduct(right.penalty).mul(penalties[1]);
  return { columns, penalties: [first, second], unpenalised: 1 };
}

/** Level, slope per standard deviation, and splines freed of both over all rows, each under its ridge, group by group. */
function deviationTerm(x: readonly number[], group: readonly string[], size: number, penalty: number): PlainTerm {
  const mean = x.reduce((sum, value) => sum + value, 0) / x.length;
  const spread = Math.sqrt(x.reduce((sum, value) => sum + (value - mean) ** 2, 0) / x.length);
  const line = x.map((value) => (value - mean) / spread);
  const bent = splineColumns(x, size).mmul(new Matrix(Array.from({ length: size }, (_, k) => Array.from({ length: size - 2 }, (__, j) => Math.max(0, k - j - 1)))));
  const freed = bent.transpose().to2DArray().map((column) => {
    const level = column.reduce((sum, value) => sum + value, 0) / x.length;
    const steep = column.reduce((sum, value, row) => sum + value * line[row], 0) / x.length;
    return column.map((value, row) => value - level - steep * line[row]);
  });
  const own = new Matrix([x.map(() => 1), line, ...freed]).transpose();
  const levels = levelsOf(group);
  const columns = beside(levels.map((level) => timesRows(own, group.map((name) => Number(name === level)))));
  return { columns, penalties: [Matrix.eye(columns.columns).mul(penalty)], unpenalised: 0 };
}

function smoothTerm(term: SmoothTerm, x: readonly number[], rows: Rows, penalty: number): PlainTerm {
  const size = term.size ?? 10;
  const columns = splineColumns(x, size);
  const bend = differences(size, 2).mul(penalty);
  if (term.by === undefined) return centred(columns, bend, 1);
  const by = rows[term.by];
  if (typeof by[0] === "number") return { columns: timesRows(columns, numbersOf(rows, term.by)), penalties: [bend], unpenalised: 2 };
  const curves = levelsOf(by).map((level) => centred(timesRows(columns, Array.from(by, (own) => Number(own === level))), bend, 1));
  return { columns: beside(curves.map((curve) => curve.columns)), penalties: [blockDiagonal(curves.map((curve) => curve.penalties[0]))], unpenalised: curves.length };
}

/** Of every kind but local regression, which is no set of columns. Penalties must be given as numbers. */
export function plainTerm(term: TermSpec, rows: Rows): PlainTerm {
  const penalty = "smoothness" in term && typeof term.smoothness === "object" && "penalty" in term.smoothness ? term.smoothness.penalty : 0;
  const isLog = "log" in term && term.log === true;
  const x = term.kind === "tensor-product" || term.kind === "factor" || term.kind === "random-effect" ? [] : numbersOf(rows, term.column).map((value) => (isLog ? Math.log(value) : value));
  switch (term.kind) {
    case "linear": return { columns: new Matrix(x.map((value) => [value])), penalties: [], unpenalised: 1 };
    case "factor": {
      const values = Array.from(rows[term.column], String);
      const levels = levelsOf(values).filter((level, k) => (term.reference === undefined ? k > 0 : level !== term.reference));
      return { columns: indicators(values, levels), penalties: [], unpenalised: levels.length };
    }
    case "smooth": return smoothTerm(term, x, rows, penalty);
    case "cyclic-smooth": return centred(circleColumns(x, term.size ?? 12, term.period), differences(term.size ?? 12, 2, true).mul(penalty), 0);
    case "natural-spline": return { columns: naturalColumns(x, term.df), penalties: [], unpenalised: term.df };
    case "tensor-product": return surfaceTerm(numbersOf(rows, term.columns[0]), numbersOf(rows, term.columns[1]), term.sizes ?? [5, 5], [penalty, penalty]);
    case "random-walk": {
      const [first, last] = [Math.min(...x), Math.max(...x)];
      const weeks = Array.from({ length: last - first + 1 }, (_, k) => String(first + k));
      return centred(indicators(x.map(String), weeks), differences(weeks.length, 1).mul(penalty), 0);
    }
    case "random-effect": {
      const groups = Array.from(rows[term.column], String);
      const own = indicators(groups, levelsOf(groups));
      return { columns: term.by === undefined ? own : timesRows(own, numbersOf(rows, term.by)), penalties: [Matrix.eye(own.columns).mul(penalty)], unpenalised: 0 };
    }
    case "factor-smooth": return deviationTerm(x, rows[term.group].map(String), term.size ?? 6, penalty);
    case "local-regression": throw new Error("A local regression is no set of columns.");
  }
}
