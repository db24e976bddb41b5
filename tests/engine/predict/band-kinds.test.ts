import { bandModel, compareModels, fitModel, modelReport, parseModel, predict, serialiseModel, termCurve } from "@shared/engine";
import type { BandKind, FittedModel, ModelBand } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { exampleModel, exampleNames, storeRows } from "../inference/support/example-models";
import { largestDifference } from "../support/measures";

const kinds: readonly ModelBand[] = ["pointwise", "corrected", "averaged"];
const rows = storeRows(3);
const curves = exampleModel("curves and a factor");

const distance = (one: FittedModel, other: FittedModel) =>
  largestDifference(one.covariance, other.covariance) / Math.max(...other.covariance.map(Math.abs));

describe("A model says which band its covariance is of", () => {
  it.each(kinds)("as bandModel made it: %s", (band) => {
    expect(bandModel(curves, band).band).toBe(band);
  });

  it("pointwise as it was fitted, with groups and with local regression too", () => {
    const local = fitModel({ response: "y", family: "gaussian", terms: [{ kind: "local-regression", column: "price", span: 0.6 }] }, rows);
    for (const model of [curves, exampleModel("a curve per store"), local]) expect(model.band).toBe("pointwise");
  });

  it("averaged where no penalty was chosen, since there is nothing to average over", () => {
    const lines = exampleModel("lines and a factor");
    const averaged = bandModel(lines, "averaged");
    expect(averaged.band).toBe("averaged");
    expect(averaged.covariance).toBe(lines.covariance);
  });

  it("still pointwise where what was chosen cannot be averaged over: smooths of eliminated groups alone, local regression", () => {
    const groups = exampleModel("levels and slopes of stores");
    expect(bandModel(groups, "averaged").band).toBe("pointwise");
    const local = fitModel({ response: "y", family: "gaussian", terms: [{ kind: "local-regression", column: "price", span: 0.6 }] }, rows);
    expect(bandModel(local, "averaged").band).toBe("pointwise");
  });
});

describe("Nothing is added twice", () => {
  it.each(kinds)("to a model of the band asked for: %s", (band) => {
    const once = bandModel(curves, band);
    expect(bandModel(once, band)).toBe(once);
    expect(bandModel(once)).toBe(once);
  });

  it("by a curve: the averaged model's own band is the averaged one", () => {
    const averaged = bandModel(curves, "averaged");
    const curve = termCurve(curves, "price", { band: "averaged", derivative: true });
    expect(termCurve(averaged, "price", { derivative: true })).toEqual(curve);
    expect(termCurve(averaged, "price", { derivative: true, band: "averaged" })).toEqual(curve);
  });

  it("by the text a model is kept as", () => {
    const averaged = bandModel(curves, "averaged");
    const kept = parseModel(serialiseModel(averaged));
    expect(kept).toEqual(averaged);
    expect(bandModel(kept, "averaged")).toBe(kept);
  });
});

describe("The text of a model", () => {
  const text = (change: object) => JSON.stringify({ ...(JSON.parse(serialiseModel(curves)) as object), ...change });

  it("from before models said their band is of the band it was fitted with", () => {
    const old = parseModel(text({ band: undefined }));
    expect(text({ band: undefined })).not.toMatch(/"band"/);
    expect(old).toEqual(curves);
    expect(bandModel(old, "averaged")).toEqual(bandModel(curves, "averaged"));
  });

  it.each(["with-mean", "wide", null, 1])("with a band no covariance can be of is refused: %s", (band) => {
    expect(() => parseModel(text({ band }))).toThrow("The text is not a model of format 1.");
  });
});

describe.each(exampleNames)("From any kind to any other: %s", (name) => {
  const model = exampleModel(name);

  it("the covariance is that of the fitted model's band (1e-8 of the largest)", () => {
    for (const from of kinds) {
      const start = bandModel(model, from);
      for (const to of kinds) expect(distance(bandModel(start, to), bandModel(model, to)), `${from} to ${to}`).toBeLessThan(1e-8);
    }
  });

  it("tests, degrees of freedom, concurvity and AIC are those of the fitted model", () => {
    for (const band of kinds) expect(modelReport(bandModel(model, band)), band).toEqual(modelReport(model));
  });
});

it("Models are compared alike whatever their bands", () => {
  const smaller = fitModel({ ...curves.spec, terms: curves.spec.terms.slice(0, 1) }, rows);
  expect(compareModels(bandModel(smaller, "averaged"), bandModel(curves, "averaged"))).toEqual(compareModels(smaller, curves));
});

it("A curve of a model with the penalties' error can still be drawn with penalties taken as known (1e-6)", () => {
  const averaged = bandModel(curves, "averaged");
  for (const band of ["pointwise", "with-mean", "corrected"] satisfies BandKind[]) {
    const [own, known] = [averaged, curves].map((model) => termCurve(model, "price", { points: 15, band }).standardError);
    own.forEach((value, k) => expect(Math.abs(value / known[k] - 1)).toBeLessThan(1e-6));
  }
  const narrower = termCurve(averaged, "price", { points: 15, band: "pointwise" }).standardError;
  termCurve(averaged, "price", { points: 15 }).standardError.forEach((value, k) => expect(value).toBeGreaterThan(1.001 * narrower[k]));
});

it("Predictions have the model's band, their estimates do not change", () => {
  const [known, averaged] = [curves, bandModel(curves, "averaged")].map((model) => predict(model, rows));
  expect(averaged.linearPredictor).toEqual(known.linearPredictor);
  expect(averaged.contributions).toEqual(known.contributions);
  averaged.standardError.forEach((value, row) => expect(value).toBeGreaterThan(known.standardError[row]));
});
