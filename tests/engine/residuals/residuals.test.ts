import { fitModel, residuals } from "@shared/engine";
import type { ModelData, ModelSpec, ResidualKind, ResidualOptions } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { largestDifference } from "../support/measures";
import { gaussianSpec, quasiPoissonSpec, salesRows } from "../support/sales-rows";
import { simulatedSales, simulatedSpec } from "../support/simulated-sales";

const rows = {
  y: [3, 0, 7, 12, 2, 5, 9, 4], x: [1, 2, 3, 4, 5, 6, 7, 8], w: [1, 2, 1, 0.5, 1, 3, 1, 1], o: [0.1, 0, 0.2, -0.1, 0.3, 0, 0, 0.1],
};
const line: ModelSpec["terms"] = [{ kind: "linear", column: "x" }];
const moments = (values: Float64Array) => {
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  return { mean, deviation: Math.sqrt(values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / values.length) };
};

describe("Residuals of a line are R 4.2.2's, with weights and offset", () => {
  const spec: ModelSpec = { response: "y", family: "quasi-poisson", weights: "w", offset: "o", terms: line };
  /** residuals(glm(y ~ x + offset(o), quasipoisson, weights = w), type = ...). */
  const expected: [ResidualKind, number[]][] = [
    ["deviance", [0.3256007842, -3.230010442, 1.515466711, 2.651000121, -1.751933345, 0.1318831882, 1.302274923, -1.326007377]],
    ["pearson", [0.3366575931, -2.283962287, 1.703153551, 3.467146561, -1.518542087, 0.1326424202, 1.416553178, -1.212133675]],
    ["response", [0.5291861043, -2.608241864, 3.283415321, 8.78787112, -3.590466242, 0.1683333977, 3.363179132, -3.267766341]],
  ];

  it.each(expected)("for quasi-Poisson, %s", (kind, values) => {
    expect(largestDifference(residuals(fitModel(spec, rows), rows, { kind }), values)).toBeLessThan(1e-7);
  });

  it("for the binomial: residuals(glm(cbind(s, n - s) ~ x, binomial))", () => {
    const trials = [10, 4, 1, 25, 8, 3, 5, 6];
    const share = [3, 0, 1, 12, 5, 1, 2, 4].map((successes, row) => successes / trials[row]);
    const data = { share, trials, x: rows.x };
    const model = fitModel({ response: "share", family: "binomial", weights: "trials", terms: line }, data);
    const deviance = [-0.004156070341, -1.83680457, 1.371636766, 0.4151181157, 0.7772930454, -0.7136184201, -0.8404559092, 0.1656924996];
    const pearson = [-0.004155277885, -1.448584039, 1.249703131, 0.4162975724, 0.7740517671, -0.7108839591, -0.8490649235, 0.1645836676];
    expect(largestDifference(residuals(model, data), deviance)).toBeLessThan(1e-7);
    expect(largestDifference(residuals(model, data, { kind: "pearson" }), pearson)).toBeLessThan(1e-7);
  });

  it("for the log-gaussian: residuals(lm(log(y + 1) ~ x, weights = w), \"pearson\")", () => {
    const data = { ...rows, y: rows.y.map((value) => value + 1) };
    const model = fitModel({ response: "y", family: "log-gaussian", weights: "w", terms: line }, data);
    const expectedOnes = [0.6452399786, -1.325310162, 0.9462243182, 0.8737369988, -0.4267677756, 0.1217596808, 0.3850421878, -0.5041864132];
    expect(largestDifference(residuals(model, data, { kind: "pearson" }), expectedOnes)).toBeLessThan(1e-8);
    expect(largestDifference(residuals(model, data, { kind: "deviance" }), expectedOnes)).toBeLessThan(1e-8);
  });
});

const cases: [string, ModelSpec, ModelData][] = [
  ["gaussian", gaussianSpec, salesRows(3)],
  ["quasi-poisson", quasiPoissonSpec, salesRows(3)],
  ["log-gaussian", simulatedSpec("log-gaussian"), simulatedSales("log-gaussian", { seed: 4, count: 300, shape: "gentle" }).data],
  ["negative-binomial", simulatedSpec("negative-binomial"), simulatedSales("negative-binomial", { seed: 5, count: 300, shape: "gentle" }).data],
  ["binomial", simulatedSpec("binomial"), simulatedSales("binomial", { seed: 6, count: 300, shape: "gentle" }).data],
];

describe.each(cases)("Residuals of a %s model", (_name, spec, data) => {
  const model = fitModel(spec, data);
  const of = (kind: ResidualKind, options: ResidualOptions = {}) => residuals(model, data, { kind, ...options });

  it("have the deviance for the sum of squares of the deviance ones", () => {
    expect(Math.abs(of("deviance").reduce((sum, value) => sum + value * value, 0) / model.deviance - 1)).toBeLessThan(1e-10);
  });

  it("have the same signs in every kind that draws nothing, but where mean and median differ", () => {
    const [deviance, pearson] = [of("deviance"), of("pearson")];
    deviance.forEach((value, row) => expect(Math.sign(value)).toBe(Math.sign(pearson[row])));
  });

  it("are the response less the fitted value", () => {
    const response = data[spec.response] as number[];
    of("response").forEach((value, row) => expect(value).toBeCloseTo(response[row] - model.fitted[row], 9));
  });

  it("are near standard normal as quantile residuals: mean and deviation within four standard errors", () => {
    const { mean, deviation } = moments(of("quantile"));
    const count = model.rowCount;
    expect(Math.abs(mean)).toBeLessThan(4 / Math.sqrt(count));
    // Fitting takes the edf out of the squares.
    expect(Math.abs(deviation - Math.sqrt(1 - model.edf / count))).toBeLessThan(4 / Math.sqrt(2 * count) + 0.05);
  });

  it("are the same for the same seed, and finite", () => {
    expect(of("quantile", { seed: 9 })).toEqual(of("quantile", { seed: 9 }));
    expect(of("quantile")).toEqual(of("quantile", { seed: 1 }));
    for (const kind of ["deviance", "pearson", "quantile", "response"] as const) expect(of(kind).every(Number.isFinite)).toBe(true);
  });

  it("depend on the seed where, and only where, responses are counts", () => {
    const isCounted = spec.family !== "gaussian" && spec.family !== "log-gaussian";
    expect(largestDifference(of("quantile", { seed: 1 }), of("quantile", { seed: 2 })) > 0).toBe(isCounted);
  });

  it("are had of other rows than those fitted to, one by one", () => {
    const one = Object.fromEntries(Object.entries(data).map(([name, column]) => [name, [column[7]]])) as ModelData;
    expect(residuals(model, one)[0]).toBeCloseTo(of("deviance")[7], 12);
  });
});

describe("Quantile residuals", () => {
  it("of fractional units come from the gamma, and a zero is what rounds to it", () => {
    const { data } = simulatedSales("quasi-poisson", { seed: 8, count: 200, shape: "gentle" });
    const weighed = { ...data, response: data.response.map((value, row) => (value === 0 ? 0 : value + 0.25 + (row % 3) / 8)) };
    const model = fitModel(simulatedSpec("quasi-poisson"), weighed);
    expect(model.fractionalResponse).toBe(true);
    const values = residuals(model, weighed, { kind: "quantile" });
    const [first, second] = [1, 2].map((seed) => residuals(model, weighed, { kind: "quantile", seed }));
    values.forEach((value, row) => {
      expect(Math.abs(value)).toBeLessThanOrEqual(8.3);
      if (weighed.response[row] > 0) expect(first[row]).toBe(second[row]);
    });
  });

  it("stay within 8.3 of 0 for counts out of all proportion", () => {
    const model = fitModel(quasiPoissonSpec, salesRows(3));
    const far = { ...salesRows(3, 2), units: [1e9, 0] };
    const [high] = residuals(model, far, { kind: "quantile" });
    expect(high).toBeGreaterThan(8);
    expect(high).toBeLessThan(8.3);
  });

  it("judge rows of weight 0, which the fit left out, as of weight 1", () => {
    const data = { ...rows, w: [1, 2, 0, 0.5, 1, 3, 1, 1] };
    const model = fitModel({ response: "y", family: "quasi-poisson", weights: "w", terms: line }, data);
    for (const kind of ["deviance", "pearson", "quantile", "response"] as const) {
      expect(residuals(model, data, { kind })[2]).toBe(residuals(model, { ...data, w: [1, 2, 1, 0.5, 1, 3, 1, 1] }, { kind })[2]);
    }
  });
});

describe("Residuals refuse", () => {
  const model = fitModel({ response: "y", family: "quasi-poisson", weights: "w", terms: line }, rows);
  const untyped = (text: string) => JSON.parse(text) as ResidualOptions;
  const cases: [string, ModelData, ResidualOptions, string][] = [
    ["an unknown kind", rows, untyped('{"kind":"raw"}'), 'kind is "raw"; it must be one of "deviance", "pearson", "quantile", "response".'],
    ["a seed that is not whole", rows, { seed: 1.5 }, "seed is 1.5; it must be a whole number within 2147483648 of 0."],
    ["a seed too large", rows, { seed: 1e12 }, "seed is 1000000000000; it must be a whole number within 2147483648 of 0."],
    ["a negative count", { ...rows, y: [3, -1, 7, 12, 2, 5, 9, 4] }, {}, 'Response "y" must not be negative for quasi-poisson; row 2 is -1.'],
    ["a negative weight", { ...rows, w: [1, 2, 1, 0.5, -3, 3, 1, 1] }, {}, 'Column "w" (weights) must not be negative; row 5 is -3.'],
    ["a missing response", { x: [1], w: [1] }, {}, 'Column "y" (response) is missing; the data has "x", "w".'],
    ["unequal lengths", { ...rows, x: [1, 2] }, {}, 'Column "x" has 2 rows, "y" has 8; all columns must have the same length.'],
  ];

  it.each(cases)("%s", (_what, data, options, message) => {
    expect(() => residuals(model, data, options)).toThrow(expect.objectContaining({ name: "EngineError", message }) as Error);
  });

  it("no rows of zeros: they can be judged, though not fitted to", () => {
    expect(residuals(model, { y: [0], x: [3], w: [1] })[0]).toBeLessThan(0);
    expect(residuals(model, { y: [], x: [], w: [] })).toEqual(new Float64Array(0));
  });
});
