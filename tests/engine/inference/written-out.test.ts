import { designRows, fitModel, modelReport, predict } from "@shared/engine";
import type { Family, FittedModel, ModelSpec, TermSpec } from "@shared/engine";
import { packedIndex } from "@shared/engine/linalg/packed-symmetric";
import { addRowsTimes } from "@shared/engine/linalg/sparse-rows";
import { termCoordinates } from "@shared/engine/penalty/term-transform";
import { sharedCoefficients } from "@shared/engine/predict/shared-coefficients";
import { Matrix, pseudoInverse } from "ml-matrix";
import { describe, expect, it } from "vitest";
import { everyKind, everyKindRows, families, modelOf, withAuto } from "../support/every-kind-rows";

/** What tests and criteria are made of, against columns of the rows written out one by one. */
const base = everyKindRows(71, 90);
const rows = { ...base, weight: base.price.map((_, row) => 1 + (row % 4) / 2) };
const specOf = (family: Family, terms: readonly TermSpec[]): ModelSpec => modelOf(family, withAuto(terms), { weights: "weight" });

/** Expected information of each row about its predictor, from the fitted means. */
function workingWeights({ spec, fitted, theta }: FittedModel): number[] {
  const of: Record<Family, (mean: number) => number> = {
    gaussian: () => 1, "log-gaussian": () => 1, "quasi-poisson": (mean) => mean, binomial: (mean) => mean * (1 - mean),
    "negative-binomial": (mean) => mean / (1 + mean / (theta ?? Number.NaN)),
  };
  return Array.from(fitted, (mean, row) => rows.weight[row] * of[spec.family](mean));
}

/** The rows' values of one shared coordinate alone. */
function columnOf(model: FittedModel, coordinate: number): Float64Array {
  const size = model.information?.size ?? 0;
  const coefficients = sharedCoefficients(model, Float64Array.from({ length: size }, (_, k) => Number(k === coordinate)));
  const all = new Float64Array(model.coefficients.length);
  all.set(coefficients);
  const { parts, count } = designRows(model, rows);
  const out = new Float64Array(count);
  for (const part of parts) addRowsTimes(part.rows, all, part.first, out);
  return out;
}

const plain = Object.entries(everyKind).filter(([name]) => !["local regression", "smooth per level"].includes(name));

describe.each(families)("The information of a %s model", (family) => {
  it.each(plain)("is X'WX over the columns its shared coordinates stand for: %s", (_name, terms) => {
    const model = fitModel(specOf(family, terms), rows);
    const { information } = model;
    if (information === null) throw new Error("the model has information");
    const weights = workingWeights(model);
    const columns = Array.from({ length: information.size }, (_, k) => columnOf(model, k));
    const largest = Math.max(...information.shared.map(Math.abs));
    for (let row = 0; row < information.size; row++) {
      for (let column = 0; column <= row; column++) {
        const product = weights.reduce((sum, weight, k) => sum + weight * columns[row][k] * columns[column][k], 0);
        // Weights are of the last working model, whose means differ from the fitted ones by less than it rests within.
        expect(Math.abs(information.shared[packedIndex(row, column)] - product)).toBeLessThan(1e-5 * largest);
      }
    }
    const predictor = predict(model, rows).linearPredictor;
    const shared = predictor.map((_value, k) => columns.reduce((sum, own, at) => sum + own[k] * information.coordinates[at], 0));
    if (information.groups === null) shared.forEach((value, k) => expect(value).toBeCloseTo(predictor[k], 8));
  });
});

const price: TermSpec = { kind: "smooth", column: "price", log: true, size: 7 };
const temperature: TermSpec = { kind: "smooth", column: "temperature", size: 6 };
const tangled: [string, TermSpec[]][] = [
  ["two lines", [{ kind: "linear", column: "price" }, { kind: "linear", column: "depth" }]],
  ["a line and a factor", [{ kind: "linear", column: "price" }, { kind: "factor", column: "promotion" }]],
  ["a curve, a line and a factor", [price, { kind: "linear", column: "depth" }, { kind: "factor", column: "promotion" }]],
  ["a circle and a curve of the weather that follows it", [{ kind: "cyclic-smooth", column: "season", period: [0, 1], size: 8 }, temperature]],
  ["a natural spline and a curve of the same column's logarithm", [{ kind: "natural-spline", column: "price", df: 3 }, { ...price, id: "curve" } as TermSpec]],
  ["two curves and a regression spline of weeks", [price, temperature, { kind: "natural-spline", column: "week", df: 3 }]],
  ["two curves and their surface", [price, temperature, { kind: "tensor-product", columns: ["price", "temperature"] }]],
  ["a curve and itself times a number", [temperature, { ...temperature, by: "depth" } as TermSpec]],
];

describe.each(families)("Concurvity in a %s model", (family) => {
  it.each(tangled)("is the share of a term's values that weighted least squares on all others' columns reproduces: %s", (_name, terms) => {
    const model = fitModel(specOf(family, terms), rows);
    const roots = workingWeights(model).map(Math.sqrt);
    // By coordinates: raw columns hold what coordinates leave out, a surface's main effects and a spline's bent ends.
    const columnsOf = (at: number): Float64Array[] => {
      const { basis, layout } = model.terms[at];
      const { unpenalised, penalised } = termCoordinates(basis);
      const places = Array.from({ length: unpenalised + penalised }, (_, k) => (k < unpenalised ? layout.unpenalisedFirst + k : layout.penalisedFirst + k - unpenalised));
      return places.map((place) => columnOf(model, place));
    };
    const { contributions } = predict(model, rows);
    modelReport(model).terms.forEach(({ id, concurvity, edf }, at) => {
      if (concurvity === null || edf < 1e-3) return;
      const others = [Float64Array.from(roots, () => 1), ...terms.flatMap((_term, other) => (other === at ? [] : columnsOf(other)))];
      // Taken off both: the intercept.
      const level = roots.reduce((sum, root, row) => sum + root * root * contributions[id][row], 0) / roots.reduce((sum, root) => sum + root * root, 0);
      const own = roots.map((root, row) => root * (contributions[id][row] - level));
      const design = new Matrix(roots.map((root, row) => others.map((column) => root * column[row])));
      const projected = design.mmul(pseudoInverse(design, 1e-9)).mmul(Matrix.columnVector(own)).to1DArray();
      const squares = (values: number[]) => values.reduce((sum, value) => sum + value * value, 0);
      expect(concurvity).toBeCloseTo(squares(projected) / squares(own), 3);
    });
  });
});
