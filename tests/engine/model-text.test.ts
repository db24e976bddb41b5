import { fitModel, parseModel, predict, serialiseModel } from "@shared/engine";
import { expect, it } from "vitest";
import { gaussianSpec, quasiPoissonSpec, salesRows } from "./support/sales-rows";

const data = salesRows(21);

it.each([gaussianSpec, quasiPoissonSpec])("A $family model comes back from its text the same to the last bit", (spec) => {
  const model = fitModel(spec, data);
  const back = parseModel(serialiseModel(model));
  expect(back).toEqual(model);
  expect(serialiseModel(back)).toBe(serialiseModel(model));
  expect(new Uint8Array(back.covariance.buffer)).toEqual(new Uint8Array(model.covariance.buffer, model.covariance.byteOffset, model.covariance.byteLength));
  expect(predict(back, data)).toEqual(predict(model, data));
});

it("Numbers that JSON cannot hold come back too", () => {
  const model = fitModel(gaussianSpec, data);
  const odd = { ...model, fitted: Float64Array.of(-0, Number.NaN, Infinity, 5e-324), deviance: -0, criterion: -Infinity };
  const back = parseModel(serialiseModel(odd));
  expect(back.fitted).toEqual(odd.fitted);
  expect(Object.is(back.deviance, -0)).toBe(true);
  expect(back.criterion).toBe(-Infinity);
});

it("The text is plain JSON", () => {
  const text = serialiseModel(fitModel(gaussianSpec, data));
  expect(() => JSON.parse(text)).not.toThrow();
  expect(text).not.toMatch(/[^\u0020-\u007e]/u);
});

it.each([
  ["", /^The text is not a model: /],
  ["{", /^The text is not a model: /],
  ["null", /^The text is not a model of format 1\.$/],
  ["[]", /^The text is not a model of format 1\.$/],
  ['{"format":2}', /^The text is not a model of format 1\.$/],
  ['{"format":1,"fitted":{"$float64":"AAAA"}}', /^The text is not a model: an array is cut short\.$/],
  ['{"format":1,"fitted":{"$float64":"*"}}', /^The text is not a model: /],
])("Text that is no model is refused: %s", (text, message) => {
  expect(() => parseModel(text)).toThrow(expect.objectContaining({ name: "EngineError", code: "model-text-invalid", message: expect.stringMatching(message) }));
});
