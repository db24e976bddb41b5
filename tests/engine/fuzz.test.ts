import { EngineError, fitModel, modelReport, parseModel, predict, serialiseModel, termCurve } from "@shared/engine";
import type { FittedModel, ModelData, ModelSpec, TermSpec } from "@shared/engine";
import fc from "fast-check";
import { expect, it } from "vitest";

const smoothness = fc.oneof(
  fc.constant("auto" as const),
  fc.record({ df: fc.double({ min: -1, max: 14, noNaN: false }) }),
  fc.record({ penalty: fc.double({ min: -1, max: 1e6 }) }),
);
const column = fc.constantFrom("a", "b", "c", "d", "e");
const term: fc.Arbitrary<TermSpec> = fc.oneof(
  fc.record({ kind: fc.constant("linear" as const), column, log: fc.boolean() }),
  fc.record({ kind: fc.constant("factor" as const), column }),
  fc.record({ kind: fc.constant("smooth" as const), column, log: fc.boolean(), size: fc.integer({ min: 3, max: 14 }), smoothness }),
  fc.record({
    kind: fc.constant("cyclic-smooth" as const), column, size: fc.integer({ min: 3, max: 14 }), smoothness,
    period: fc.constantFrom<[number, number]>([0, 1], [-3, 40], [2, 2]),
  }),
);
const spec: fc.Arbitrary<ModelSpec> = fc.record({
  response: fc.constantFrom("y", "counts"),
  family: fc.constantFrom("gaussian" as const, "log-gaussian" as const, "quasi-poisson" as const),
  terms: fc.array(term, { maxLength: 4 }).map((terms) => terms.map((one, k) => ({ ...one, id: `t${k}` }))),
}, {});
const withColumns = fc.record({ spec, offset: fc.boolean(), weights: fc.boolean() })
  .map(({ spec: base, offset, weights }): ModelSpec => ({ ...base, ...(offset ? { offset: "d" } : {}), ...(weights ? { weights: "b" } : {}) }));

/** Columns of every awkward sort: few values, zeros, huge and tiny numbers, repeats. */
const awkward = fc.oneof(
  { weight: 6, arbitrary: fc.double({ min: 0.1, max: 5, noNaN: true }) },
  { weight: 3, arbitrary: fc.integer({ min: 0, max: 4 }) },
  { weight: 1, arbitrary: fc.constantFrom(0, 1e-12, 1e9, -3, 40.5) },
);
const data: fc.Arbitrary<ModelData> = fc.integer({ min: 0, max: 40 }).chain((length) => {
  const numbers = (value: fc.Arbitrary<number>) => fc.array(value, { minLength: length, maxLength: length });
  const positive = fc.double({ min: 0.1, max: 5, noNaN: true });
  return fc.record({
    a: numbers(positive), b: numbers(fc.integer({ min: 0, max: 6 })), c: numbers(awkward), d: numbers(positive),
    e: numbers(fc.constantFrom(1, 2, 3, 4, 5)), y: numbers(fc.oneof(positive, awkward)),
    counts: numbers(fc.oneof(fc.integer({ min: 0, max: 12 }), fc.integer({ min: 0, max: 3 }).map((size) => 10 ** size))),
  });
});

function expectFinite(model: FittedModel, rows: ModelData): void {
  const numbers = [model.dispersion, model.edf, model.deviance, model.nullDeviance, model.criterion];
  for (const term of model.terms) numbers.push(term.edf, ...term.penalties);
  expect(numbers.filter((value) => !Number.isFinite(value))).toEqual([]);
  for (const values of [model.coefficients, model.covariance, model.fitted]) expect(values.every(Number.isFinite)).toBe(true);
  for (const interval of ["mean", "observation"] as const) {
    const prediction = predict(model, rows, { interval });
    const { mean, lower, upper, standardError } = prediction;
    for (const values of [mean, lower, upper, standardError, prediction.linearPredictor]) expect(values.every(Number.isFinite)).toBe(true);
    expect(lower.every((value, row) => value <= upper[row])).toBe(true);
  }
  for (const { id } of model.terms) {
    const curve = termCurve(model, id, { points: 7, derivative: true });
    expect([...curve.estimate, ...curve.standardError, ...(curve.derivative?.estimate ?? [])].every(Number.isFinite)).toBe(true);
  }
  expect(modelReport(model).terms).toHaveLength(model.terms.length);
  expect(serialiseModel(parseModel(serialiseModel(model)))).toBe(serialiseModel(model));
}

it("Any specification on any data gives finite numbers or an error of the engine's own", () => {
  let fitted = 0;
  fc.assert(fc.property(withColumns, data, (anySpec, rows) => {
    let model: FittedModel;
    try {
      model = fitModel(anySpec, rows);
    } catch (error) {
      if (error instanceof EngineError && error.message !== "") return;
      throw error;
    }
    fitted++;
    expectFinite(model, rows);
  }), { numRuns: 400, seed: 20240219 });
  // Else the property would hold of errors alone.
  expect(fitted).toBeGreaterThan(80);
}, 120_000);
