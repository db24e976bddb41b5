import { columnsOf } from "../basis/term-basis";
import { numberColumn, rowCount } from "../basis/columns";
import { EngineError } from "../errors";
import type { ModelData, ModelSpec } from "../types";

/** The rows of weight above zero, and what the fit reads of them besides the terms' columns. */
export type FittedRows = {
  data: ModelData;
  count: number;
  response: Float64Array;
  offset: Float64Array;
  weights: Float64Array;
};

/**
 * Checks the columns a specification names, and picks the rows that are fitted to.
 *
 * @throws EngineError column-missing, length-mismatch, column-kind, value-not-finite, weights-invalid, too-few-rows.
 * @example fittedRows(spec, data).count;
 */
export function fittedRows(spec: ModelSpec, data: ModelData): FittedRows {
  const columns: [string, string][] = [[spec.response, "response"]];
  if (spec.offset !== undefined) columns.push([spec.offset, "offset"]);
  if (spec.weights !== undefined) columns.push([spec.weights, "weights"]);
  for (const term of spec.terms) for (const column of columnsOf(term)) columns.push([column, term.kind]);
  const all = rowCount(data, columns);
  const weights = spec.weights === undefined ? new Float64Array(all).fill(1) : priorWeights(data, spec.weights);
  const rows = {
    data, count: all, weights,
    response: numberColumn(data, spec.response, "response"),
    offset: spec.offset === undefined ? new Float64Array(all) : numberColumn(data, spec.offset, "offset"),
  };
  const kept = spec.weights === undefined ? all : weights.reduce((sum, weight) => sum + (weight > 0 ? 1 : 0), 0);
  if (kept < 2) {
    throw new EngineError("too-few-rows", `The data has ${kept} rows of weight above 0; a fit needs at least 2.`);
  }
  return kept === all ? rows : keepWeighted(rows, columns.map(([name]) => name));
}

/** Reciprocals of products of three must stay finite. */
const smallestWeight = 1e-50;

function priorWeights(data: ModelData, name: string): Float64Array {
  const weights = numberColumn(data, name, "weights");
  for (let row = 0; row < weights.length; row++) {
    if (weights[row] < 0) {
      throw new EngineError("weights-invalid", `Column "${name}" (weights) must not be negative; row ${row + 1} is ${weights[row]}.`);
    }
    if (weights[row] > 0 && weights[row] < smallestWeight) {
      throw new EngineError("weights-invalid", `Column "${name}" (weights) must be 0 or at least ${smallestWeight}; row ${row + 1} is ${weights[row]}.`);
    }
  }
  return weights;
}

function keepWeighted(rows: FittedRows, names: readonly string[]): FittedRows {
  const isKept = (_value: unknown, row: number) => rows.weights[row] > 0;
  const data: ModelData = {};
  for (const name of names) {
    const column = rows.data[name];
    if (column instanceof Float64Array) data[name] = column.filter(isKept);
    else data[name] = column.filter(isKept) as number[] | string[];
  }
  const response = rows.response.filter(isKept);
  return { data, count: response.length, response, offset: rows.offset.filter(isKept), weights: rows.weights.filter(isKept) };
}
