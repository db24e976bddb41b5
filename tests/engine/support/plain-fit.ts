import type { Family, ModelSpec } from "@shared/engine";
import { Matrix, inverse, solve } from "ml-matrix";
import { beside, plainTerm } from "./plain-columns";

type Rows = Record<string, readonly (number | string)[]>;

/** A penalised fit by dense matrices, one row and column after the other. */
export type PlainFit = {
  linearPredictor: number[];
  /** Per term: contributions to the rows less their mean, and the trace of its block of (X'WX + S)^-1 X'WX. */
  terms: { contribution: number[]; edf: number }[];
  edf: number;
  dispersion: number;
  deviance: number;
  standardError: number[];
  /** D + b'Sb (of the deviance) and ln|X'WX + S| at the answer. */
  penalisedDeviance: number;
  logDeterminant: number;
};

const logistic = (value: number) => 1 / (1 + Math.exp(-value));

/** Mean, variance at dispersion 1 and unit deviance of each family, from the textbook. */
const families: Record<Family, { mean: (eta: number) => number; variance: (mu: number, theta: number) => number; deviance: (y: number, mu: number, theta: number) => number }> = {
  gaussian: { mean: (eta) => eta, variance: () => 1, deviance: (y, mu) => (y - mu) ** 2 },
  "log-gaussian": { mean: (eta) => eta, variance: () => 1, deviance: (y, mu) => (y - mu) ** 2 },
  "quasi-poisson": { mean: Math.exp, variance: (mu) => mu, deviance: (y, mu) => 2 * ((y > 0 ? y * Math.log(y / mu) : 0) - (y - mu)) },
  "negative-binomial": {
    mean: Math.exp, variance: (mu, theta) => mu + mu ** 2 / theta,
    deviance: (y, mu, theta) => 2 * ((y > 0 ? y * Math.log(y / mu) : 0) - (y + theta) * Math.log((y + theta) / (mu + theta))),
  },
  binomial: {
    mean: logistic, variance: (mu) => mu * (1 - mu),
    deviance: (y, mu) => 2 * ((y > 0 ? y * Math.log(y / mu) : 0) + (y < 1 ? (1 - y) * Math.log((1 - y) / (1 - mu)) : 0)),
  },
};

/** d mean / d predictor. */
const slopeOf = (family: Family, mu: number): number => {
  if (family === "gaussian" || family === "log-gaussian") return 1;
  return family === "binomial" ? mu * (1 - mu) : mu;
};

const startOf = (family: Family, y: number): number => {
  if (family === "binomial") return Math.log((y + 0.1) / (1.1 - y));
  return family === "gaussian" || family === "log-gaussian" ? y : Math.log(y + 0.1);
};

/** @param theta of the negative binomial, held. */
export function plainFit(spec: ModelSpec, rows: Rows, theta = 1): PlainFit {
  const column = (name: string | undefined, otherwise: number) => (name === undefined ? Array.from(rows[spec.response], () => otherwise) : rows[name].map(Number));
  const y = column(spec.response, 0).map((value) => (spec.family === "log-gaussian" ? Math.log(value) : value));
  const [offset, weights] = [column(spec.offset, 0), column(spec.weights, 1)];
  const terms = spec.terms.map((term) => plainTerm(term, rows));
  const design = beside([new Matrix(y.map(() => [1])), ...terms.map(({ columns }) => columns)]);
  const penalty = Matrix.zeros(design.columns, design.columns);
  let at = 1;
  const places = terms.map(({ columns, penalties }) => {
    const first = at;
    for (const own of penalties) for (let i = 0; i < own.rows; i++) for (let j = 0; j < own.rows; j++) penalty.set(first + i, first + j, penalty.get(first + i, first + j) + own.get(i, j));
    at += columns.columns;
    return { first, last: at };
  });
  const { mean, variance, deviance: unitDeviance } = families[spec.family];
  let eta = y.map((value) => startOf(spec.family, value));
  let [information, coefficients] = [Matrix.zeros(1, 1), Matrix.zeros(1, 1)];
  for (let step = 0; step < 100; step++) {
    const mu = eta.map(mean);
    const slopes = mu.map((value) => slopeOf(spec.family, value));
    const working = eta.map((value, row) => value - offset[row] + (y[row] - mu[row]) / slopes[row]);
    const precision = mu.map((value, row) => (weights[row] * slopes[row] ** 2) / variance(value, theta));
    const weighted = new Matrix(design.to2DArray().map((own, row) => own.map((value) => value * precision[row])));
    information = weighted.transpose().mmul(design);
    coefficients = solve(Matrix.add(information, penalty), weighted.transpose().mmul(Matrix.columnVector(working)));
    const next = design.mmul(coefficients).to1DArray().map((value, row) => value + offset[row]);
    const moved = Math.max(...next.map((value, row) => Math.abs(value - eta[row])));
    eta = next;
    if (moved < 1e-12) break;
  }
  const whole = Matrix.add(information, penalty);
  const covariance = inverse(whole);
  const traces = covariance.mmul(information).diagonal();
  const edf = traces.reduce((sum, value) => sum + value, 0);
  const mu = eta.map(mean);
  const sum = (of: (row: number) => number) => y.reduce((total, _value, row) => total + of(row), 0);
  const deviance = sum((row) => weights[row] * unitDeviance(y[row], mu[row], theta));
  const pearson = sum((row) => (weights[row] * (y[row] - mu[row]) ** 2) / variance(mu[row], theta));
  const isKnown = spec.family === "binomial" || spec.family === "negative-binomial";
  const dispersion = isKnown ? 1 : pearson / (y.length - edf);
  return {
    linearPredictor: eta, edf, dispersion, deviance,
    terms: places.map(({ first, last }) => {
      const own = design.to2DArray().map((row) => row.slice(first, last).reduce((total, value, k) => total + value * coefficients.get(first + k, 0), 0));
      const middle = own.reduce((total, value) => total + value, 0) / own.length;
      return { contribution: own.map((value) => value - middle), edf: traces.slice(first, last).reduce((total, value) => total + value, 0) };
    }),
    standardError: design.to2DArray().map((row) => {
      const vector = Matrix.rowVector(row);
      return Math.sqrt(vector.mmul(covariance).mmul(vector.transpose()).get(0, 0) * dispersion);
    }),
    penalisedDeviance: deviance + coefficients.transpose().mmul(penalty).mmul(coefficients).get(0, 0),
    logDeterminant: logDeterminantOf(whole),
  };
}

/** By elimination, row by row. */
function logDeterminantOf(matrix: Matrix): number {
  const left = matrix.clone();
  let sum = 0;
  for (let k = 0; k < left.rows; k++) {
    sum += Math.log(left.get(k, k));
    for (let row = k + 1; row < left.rows; row++) {
      const share = left.get(row, k) / left.get(k, k);
      for (let column = k; column < left.rows; column++) left.set(row, column, left.get(row, column) - share * left.get(k, column));
    }
  }
  return sum;
}
