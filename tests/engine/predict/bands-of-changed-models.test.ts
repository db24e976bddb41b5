import { bandModel, compareModels, extendModel, fitModel, influence, modelReport, parseModel, predict, residuals, serialiseModel, termCurve } from "@shared/engine";
import type { FittedModel, ModelData, TermSpec } from "@shared/engine";
import { isExtended } from "@shared/engine/predict/is-extended";
import { describe, expect, it } from "vitest";
import { everyKind, everyKindRows, families, inOrder, modelOf, withAuto } from "../support/every-kind-rows";
import { largestDifference } from "../support/measures";

/** What is asked of a model whose covariance is another than its fit's, or that was carried on to new weeks and groups. */
const rows = everyKindRows(23, 100);
const kinds = Object.entries(everyKind);
const news: ModelData = { ...inOrder(rows, [0]), week: [70], store: ["new"] };

describe.each(families)("A %s model with the error of chosen penalties in its covariance", (family) => {
  const fits = kinds.map(([name, terms]) => ({ name, model: fitModel(modelOf(family, withAuto(terms)), rows) }));
  const withInformation = fits.filter(({ model }) => model.information !== null);

  it.each(withInformation)("has the influence of rows that its fit has: $name", ({ model }) => {
    const [plain, averaged] = [model, bandModel(model, "averaged")].map((one) => influence(one, rows));
    for (const what of ["leverage", "cooksDistance", "standardisedResidual"] as const) {
      expect(largestDifference(averaged[what], plain[what])).toBeLessThan(1e-6 * Math.max(1, ...plain[what].map(Math.abs)));
    }
  });

  it.each(fits)("has the report, comparison and residuals that its fit has: $name", ({ model }) => {
    const averaged = bandModel(model, "averaged");
    expect(modelReport(averaged)).toEqual(modelReport(model));
    expect(residuals(averaged, rows)).toEqual(residuals(model, rows));
    const level = fitModel(modelOf(family, []), rows);
    expect(compareModels(level, averaged)).toEqual(compareModels(level, model));
  });
});

describe("A model of one band", () => {
  const model = fitModel(modelOf("gaussian", withAuto(everyKind["random walk"])), rows);

  it("is never made twice: asked for again it is itself, and its text says which it is", () => {
    const averaged = bandModel(model, "averaged");
    expect(averaged.band).toBe("averaged");
    expect(bandModel(averaged, "averaged")).toBe(averaged);
    expect(bandModel(averaged)).toBe(averaged);
    const read = parseModel(serialiseModel(averaged));
    expect(read).toEqual(averaged);
    expect(bandModel(read, "averaged")).toBe(read);
    expect(predict(read, rows)).toEqual(predict(averaged, rows));
  });

  it("goes back to the fit's own covariance, to rounding", () => {
    const back = bandModel(bandModel(model, "averaged"), "pointwise");
    expect(back.band).toBe("pointwise");
    expect(largestDifference(back.covariance, model.covariance)).toBeLessThan(1e-9 * Math.max(...model.covariance));
  });
});

describe("A model carried on to new weeks or groups", () => {
  const carried: [string, TermSpec[], boolean][] = [
    ["weeks of a slowly moving level", everyKind["random walk"], true],
    ["groups' levels", everyKind["random effect"], true],
    ["groups' slopes", everyKind["random slope"], true],
    ["groups' curves", everyKind["factor-smooth"], true],
    ["neither: a smooth", everyKind.smooth, false],
    ["neither: a factor", everyKind.factor, false],
  ];

  it.each(carried)("is told from its fit: %s", (_name, terms, isCarried) => {
    const model = fitModel(modelOf("gaussian", terms), rows);
    expect([isExtended(model), isExtended(extendModel(model, news)), isExtended(extendModel(model, rows))]).toEqual([false, isCarried, false]);
  });

  it("is told so too where a level is carried back", () => {
    const model = fitModel(modelOf("gaussian", everyKind["random walk"]), rows);
    expect(isExtended(extendModel(model, { week: [-4] }))).toBe(true);
  });

  const walk = (): FittedModel => fitModel(modelOf("gaussian", withAuto(everyKind["random walk"])), rows);

  it("keeps its band: one made before predicts as one carried on by the prediction", () => {
    const averaged = bandModel(walk(), "averaged");
    const before = predict(extendModel(averaged, news), news).standardError[0];
    expect(before).toBeCloseTo(predict(averaged, news).standardError[0], 12);
    expect(before).toBeGreaterThan(predict(walk(), news).standardError[0]);
    expect(termCurve(extendModel(averaged, news), "week", { at: [60, 70] }).standardError[1]).toBeCloseTo(termCurve(averaged, "week", { at: [60, 70] }).standardError[1], 12);
  });

  it.each([["averaged", "pointwise"], ["corrected", "pointwise"], ["pointwise", "averaged"], ["with-mean", "averaged"]] as const)(
    "has no other band afterwards: %s of %s is refused", (band, own) => {
      const extended = extendModel(bandModel(walk(), own), news);
      expect(() => bandModel(extended, band)).toThrow(expect.objectContaining({
        name: "EngineError", code: "option-invalid",
        message: `band is "${band}", the model's is "${own}", and it has been carried on to new weeks or groups; ask for its band before that.`,
      }) as Error);
    });

  it("is asked for its own band without complaint, and for the level's beside the plain one", () => {
    const extended = extendModel(walk(), news);
    expect(bandModel(extended)).toBe(extended);
    expect(bandModel(extended, "pointwise")).toBe(extended);
    expect(bandModel(extended, "with-mean")).toBe(extended);
  });
});
