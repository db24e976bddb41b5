import { fitModel, predict } from "@shared/engine";
import type { FittedModel, ModelData, ModelSpec, WarningCode } from "@shared/engine";
import fc from "fast-check";
import { expect, it } from "vitest";
import { anyData } from "./fuzz/any-data";
import { anySpec } from "./fuzz/any-spec";

/** Random specifications at given penalties: what must be the same for rows in another order. */
const runs = 350;
/** Where coefficients have no finite value, how far they ran is of no account. */
const runsOff: readonly WarningCode[] = ["separation", "level-without-units", "not-converged"];

const atGivenPenalties = (spec: ModelSpec): ModelSpec =>
  ({ ...spec, terms: spec.terms.map((term) => ("smoothness" in term ? { ...term, smoothness: { penalty: 2 } } : term)) });

const inOrder = (data: ModelData, order: readonly number[]): ModelData =>
  Object.fromEntries(Object.entries(data).map(([name, column]) => [name, order.map((row) => column[row])])) as ModelData;

type Outcome = { model: FittedModel } | { code: string };

function outcomeOf(spec: ModelSpec, data: ModelData): Outcome {
  try {
    return { model: fitModel(spec, data) };
  } catch (error) {
    return { code: (error as { code: string }).code };
  }
}

it(`The order of rows changes neither fit nor error: ${runs} random specifications and sets of rows`, () => {
  let [fitted, refused] = [0, 0];
  for (const [spec, data] of fc.sample(fc.tuple(anySpec, anyData), { seed: 20261201, numRuns: runs })) {
    const lengths = new Set(Object.values(data).map(({ length }) => length));
    if (lengths.size !== 1) continue;
    const [count] = lengths;
    const asked = atGivenPenalties(spec);
    const one = outcomeOf(asked, data);
    const other = outcomeOf(asked, inOrder(data, Array.from({ length: count }, (_, row) => count - 1 - row)));
    if ("code" in one || "code" in other) {
      expect(other).toEqual(one);
      refused++;
      continue;
    }
    expect(other.model.warnings.map(({ code }) => code).sort()).toEqual(one.model.warnings.map(({ code }) => code).sort());
    if (one.model.warnings.some(({ code }) => runsOff.includes(code))) continue;
    const [left, right] = [one, other].map(({ model }) => predict(model, data));
    const size = left.linearPredictor.reduce((most, value) => Math.max(most, Math.abs(value)), 1);
    left.linearPredictor.forEach((value, row) => expect(Math.abs(value - right.linearPredictor[row]) / size, JSON.stringify(asked)).toBeLessThan(1e-4));
    expect(Math.abs(one.model.edf - other.model.edf)).toBeLessThan(1e-3);
    fitted++;
  }
  expect(fitted).toBeGreaterThan(80);
  expect(refused).toBeGreaterThan(50);
}, 120_000);
