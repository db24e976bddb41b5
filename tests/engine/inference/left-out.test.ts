import { bandModel, covarianceQuadratic, designRows, fitModel, influence, predict, transposeTimes } from "@shared/engine";
import type { Family, FittedModel, ModelData, ModelSpec, TermSpec } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKind, everyKindRows, families, modelOf } from "../support/every-kind-rows";
import { largestDifference } from "../support/measures";

/** Influence against fits that a row was truly left out of: by a weight of 1e-9, which keeps knots and centring as they are. */
const rows = everyKindRows(23, 90);
const kinds = Object.entries(everyKind).filter(([name]) => name !== "local regression");
const chosen = [0, 17, 44, 89];
const weightsBut = (out: number) => rows.y.map((_, row) => (row === out ? 1e-9 : 1));
const fit = (family: Family, terms: readonly TermSpec[], weight: number[]): FittedModel =>
  fitModel(modelOf(family, terms, { weights: "weight" }), { ...rows, weight } as ModelData);
const predictorOf = (model: FittedModel) => predict(model, rows).linearPredictor;
/** ln(response) for the lognormal: residuals are of the logarithm. */
const responseOf = (family: Family): number[] => {
  const column = rows[modelOf(family, []).response as "y"];
  return family === "log-gaussian" ? column.map(Math.log) : column;
};

describe.each(["gaussian", "log-gaussian"] as const)("In a %s model at given penalties", (family) => {
  it.each(kinds)("a row's residual without it is its residual / (1 - leverage), and Cook's distance how far the fit moves: %s", (_name, terms) => {
    const model = fit(family, terms, weightsBut(-1));
    const { leverage, cooksDistance } = influence(model, { ...rows, weight: weightsBut(-1) });
    const whole = predictorOf(model);
    const response = responseOf(family);
    for (const row of chosen) {
      const without = predictorOf(fit(family, terms, weightsBut(row)));
      expect(response[row] - without[row]).toBeCloseTo((response[row] - whole[row]) / (1 - leverage[row]), 5);
      // b - b(-i) = C x_i e_i / (1 - h_i), in the metric of C: (the predictor's own move)^2 / h_i.
      const moved = (whole[row] - without[row]) ** 2 / leverage[row];
      expect(cooksDistance[row]).toBeCloseTo(moved / (model.edf * model.dispersion), 5);
    }
  });

  it.each(kinds)("leverages are the rows' own share in their fitted values, and sum to the degrees of freedom: %s", (_name, terms) => {
    const model = fit(family, terms, weightsBut(-1));
    const { leverage, standardisedResidual } = influence(model, { ...rows, weight: weightsBut(-1) });
    expect(leverage.reduce((sum, value) => sum + value, 0)).toBeCloseTo(model.edf, 7);
    const design = designRows(model, rows);
    for (const row of chosen) {
      const gradient = transposeTimes(model, design, Float64Array.from(rows.y, (_, k) => Number(k === row)));
      expect(leverage[row]).toBeCloseTo(covarianceQuadratic(model, gradient, gradient) / model.dispersion, 10);
      const residual = responseOf(family)[row] - predictorOf(model)[row];
      expect(standardisedResidual[row]).toBeCloseTo(residual / Math.sqrt(model.dispersion * (1 - leverage[row])), 7);
    }
  });
});

describe("Without penalties Cook's distance is the squared move of all fitted values, per coefficient and dispersion (Cook 1977, equation 5)", () => {
  it.each([["a line", everyKind.line], ["a factor", everyKind.factor], ["a natural spline", everyKind["natural spline"]],
    ["all three", [...everyKind.line, ...everyKind.factor, ...everyKind["natural spline"]]]] as const)("%s", (_name, terms) => {
    const model = fit("gaussian", terms, weightsBut(-1));
    const { cooksDistance } = influence(model, { ...rows, weight: weightsBut(-1) });
    const whole = predictorOf(model);
    for (const row of chosen) {
      const without = predictorOf(fit("gaussian", terms, weightsBut(row)));
      const squares = whole.reduce((sum, value, k) => sum + (value - without[k]) ** 2, 0);
      expect(cooksDistance[row]).toBeCloseTo(squares / (model.edf * model.dispersion), 6);
    }
  });
});

describe.each(families.filter((family) => family !== "gaussian" && family !== "log-gaussian"))("In a %s model", (family) => {
  const terms: TermSpec[] = [{ kind: "smooth", column: "price", log: true, size: 6, smoothness: { penalty: 3 } }, { kind: "linear", column: "depth" }];
  const spec = modelOf(family, terms, { weights: "weight" });
  const even = { ...rows, weight: rows.y.map(() => 1) };

  it("leaving a row out moves its predictor about as Cook's distance says: within a quarter, where it moves little", () => {
    const model = fitModel(spec, even);
    const { leverage, cooksDistance } = influence(model, even);
    const whole = predictorOf(model);
    const scale = model.edf * model.dispersion;
    const judged = rows.y.map((_, row) => row).filter((row) => leverage[row] < 0.2 && cooksDistance[row] * scale > 1e-3).slice(0, 4);
    expect(judged).toHaveLength(4);
    for (const row of judged) {
      const moved = predictorOf(fitModel(spec, { ...rows, weight: weightsBut(row) }))[row] - whole[row];
      const weight = leverage[row] / (predict(model, rows).standardError[row] ** 2 / model.dispersion);
      const said = Math.sqrt((cooksDistance[row] * scale * leverage[row]) / weight);
      expect(Math.abs(moved)).toBeGreaterThan(0.75 * said);
      expect(Math.abs(moved)).toBeLessThan(1.25 * said + 0.01);
    }
  });

  it("leverages sum to the degrees of freedom, weights or none, and are the same with the band of the screens", () => {
    for (const weight of [even.weight, rows.y.map((_, row) => 1 + (row % 3))]) {
      const data = { ...rows, weight };
      const model = fitModel(spec, data);
      const { leverage } = influence(model, data);
      expect(Math.abs(leverage.reduce((sum, value) => sum + value, 0) - model.edf)).toBeLessThan(1e-4);
      expect(largestDifference(influence(bandModel(model, "averaged"), data).leverage, leverage)).toBeLessThan(1e-7);
      expect(leverage.every((value) => value > 0 && value < 1)).toBe(true);
    }
  });
});

describe("Influence is asked with the rows fitted to", () => {
  const model = fitModel(modelOf("quasi-poisson", everyKind.smooth), rows);
  const cases: [string, () => unknown, string][] = [
    ["of which none may be missing", () => influence(model, { ...rows, price: rows.price.slice(1), counts: rows.counts.slice(1) }), "The data have 89 rows, the model was fitted to 90; influence is of the rows fitted to."],
    ["with their response", () => influence(model, { price: rows.price }), 'Column "counts" (response) is missing; the data has "price".'],
    ["with counts that can be", () => influence(model, { ...rows, counts: rows.counts.map((value, row) => (row === 7 ? -1 : value)) }), 'Response "counts" must not be negative for quasi-poisson; row 8 is -1.'],
  ];

  it.each(cases)("%s", (_name, attempt, message) => {
    expect(attempt).toThrow(expect.objectContaining({ name: "EngineError", message }) as Error);
  });

  it("and leaves them, and the model, as they were", () => {
    const before = structuredClone({ model, rows });
    influence(model, rows);
    expect({ model, rows }).toEqual(before);
  });

  it("beside no row's weight of zero: those pull at nothing", () => {
    const spec: ModelSpec = modelOf("binomial", everyKind.line, { weights: "weight" });
    const data = { ...rows, weight: rows.y.map((_, row) => (row % 9 === 0 ? 0 : 4)) };
    const { leverage, cooksDistance, standardisedResidual } = influence(fitModel(spec, data), data);
    for (const row of [0, 9, 81]) expect([leverage[row], cooksDistance[row]]).toEqual([0, 0]);
    expect(standardisedResidual.every(Number.isFinite)).toBe(true);
  });
});
