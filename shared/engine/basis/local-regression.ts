import { EngineError } from "../errors";
import type { LocalRegressionBasis, LocalRegressionTerm } from "../types";
import type { BasisKind } from "./basis-kind";
import { covariate, numberColumn } from "./columns";
import { checkDistinct } from "./curve-checks";
import { localRows, localSlopeRows, windowAt } from "./local-rows";
import { outsideRange, rangeOf } from "./ranges";
import { seenNumbers } from "./seen-values";

const role = "local-regression";
const mostRows = 2000;
const defaultDegree = 1;
/** Share of the column's range below which the values of a window are one value for rounding's purposes. */
const leastReach = 1e-12;

/**
 * A local polynomial (Cleveland 1979; Cleveland & Devlin 1988). Its coefficients are values at the distinct points, which
 * `rows` turn into the curve. The rows learnt with are those of the pooling: each row's own distinct point.
 */
export const localRegression: BasisKind<LocalRegressionTerm, LocalRegressionBasis> = {
  learn(term, id, data) {
    const x = covariate(data, term, role);
    const isLog = term.log === true;
    const seen = seenNumbers(isLog ? numberColumn(data, term.column, role) : x);
    checkDistinct(seen.values, term.column, id);
    if (x.length > mostRows) {
      throw new EngineError("spec-invalid", `Term "${id}": a local regression takes up to ${mostRows} rows; the data has ${x.length}. Use a smooth.`);
    }
    const { values: at, counts: rows } = seenNumbers(x);
    const basis: LocalRegressionBasis = {
      kind: "local-regression", column: term.column, log: isLog,
      neighbours: neighboursOf(term, x.length, id),
      degree: term.degree ?? defaultDegree,
      at, rows, weights: rows.slice(), centring: new Float64Array(at.length),
    };
    checkReach(basis, id);
    centreOverRows(basis);
    const positions = new Map(Array.from(at, (value, position) => [value, position]));
    return {
      basis, seen,
      rows: { storage: "index", width: at.length, index: Int32Array.from(x, (value) => positions.get(value) ?? 0), values: null },
      observedRange: rangeOf(seen.values),
      warnings: [],
    };
  },
  rows: (basis, data) => localRows(basis, covariate(data, basis, role)),
  logSlopeRows(basis, data) {
    if (basis.degree === 0) return null;
    const rows = localSlopeRows(basis, covariate(data, basis, role));
    if (basis.log) return rows;
    const x = numberColumn(data, basis.column, role);
    return { ...rows, values: rows.values.map((slope, at) => slope * x[Math.floor(at / rows.width)]) };
  },
  outside: (range, basis, data) => outsideRange(range, numberColumn(data, basis.column, role)),
  names: (basis, id) => Array.from(basis.at, (value) => `${id}[${basis.log ? Math.exp(value) : value}]`),
};

/** Rows in a window: span x n, rounded down but for rounding's sake. */
function neighboursOf(term: LocalRegressionTerm, rowCount: number, id: string): number {
  const neighbours = Math.floor(term.span * rowCount + 1e-5);
  const needed = (term.degree ?? defaultDegree) + 2;
  if (neighbours >= needed) return neighbours;
  throw new EngineError(
    "spec-invalid",
    `Term "${id}": span ${term.span} of ${rowCount} rows takes the nearest ${neighbours}; degree ${term.degree ?? defaultDegree} needs at least ${needed}.`,
  );
}

function checkReach(basis: LocalRegressionBasis, id: string): void {
  const width = basis.at[basis.at.length - 1] - basis.at[0];
  const stuck = basis.at.find((value) => !(windowAt(basis, value).reach > leastReach * width));
  if (stuck === undefined) return;
  const shown = basis.log ? Math.exp(stuck) : stuck;
  throw new EngineError(
    "column-few-values",
    `Term "${id}": the nearest ${basis.neighbours} rows all have the value ${Number(shown.toPrecision(12))} of column "${basis.column}"; use a larger span.`,
  );
}

/** Mean of the curve's rows over the data: sum over distinct points of rows x row of the operator. */
function centreOverRows(basis: LocalRegressionBasis): void {
  const { at, rows, centring } = basis;
  const total = rows.reduce((sum, count) => sum + count, 0);
  for (let point = 0; point < at.length; point++) {
    const { values } = localRows(basis, at.subarray(point, point + 1));
    for (let k = 0; k < values.length; k++) centring[k] += (rows[point] / total) * values[k];
  }
}
