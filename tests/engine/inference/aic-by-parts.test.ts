import { compareModels, fitModel, modelReport } from "@shared/engine";
import type { Family, FittedModel, ModelSpec, TermSpec } from "@shared/engine";
import { modelDegrees } from "@shared/engine/inference/corrected-degrees";
import { describe, expect, it } from "vitest";
import { everyKind, everyKindRows, families, inOrder, modelOf, withAuto } from "../support/every-kind-rows";
import { partsOf } from "./support/example-models";

const rows = everyKindRows(19, 100);
const kinds = Object.entries(everyKind);
const withLikelihood = families.filter((family) => family !== "quasi-poisson");
const fit = (family: Family, terms: readonly TermSpec[], change: Partial<ModelSpec> = {}, data: object = rows): FittedModel =>
  fitModel(modelOf(family, withAuto(terms), change), data as typeof rows);
const aicOf = (model: FittedModel) => modelReport(model).aic ?? Number.NaN;

/** ln(n!) for log-likelihoods written out. */
const logFactorial = (n: number): number => Array.from({ length: n }, (_, k) => Math.log(k + 1)).reduce((sum, value) => sum + value, 0);

/** Of each row, constants and all, at the estimates; the normal ones at the variance that makes it largest. */
const densities: Record<Exclude<Family, "quasi-poisson">, (y: number, mean: number, model: FittedModel, row: number) => number> = {
  gaussian: (y, mean, { deviance }) => -0.5 * Math.log((2 * Math.PI * deviance) / 100) - (50 * (y - mean) ** 2) / deviance,
  "log-gaussian": (y, mean, { deviance, dispersion }) =>
    -Math.log(y) - 0.5 * Math.log((2 * Math.PI * deviance) / 100) - (50 * (Math.log(y) - Math.log(mean) + dispersion / 2) ** 2) / deviance,
  "negative-binomial": (y, mean, { theta }) => {
    const size = theta ?? Number.NaN;
    const ratio = Array.from({ length: y }, (_, k) => Math.log((size + k) / (k + 1))).reduce((sum, value) => sum + value, 0);
    return ratio + size * Math.log(size / (size + mean)) + y * Math.log(mean / (size + mean));
  },
  binomial: (y, mean, _model, row) => {
    const trials = rows.trials[row];
    const wins = Math.round(y * trials);
    return logFactorial(trials) - logFactorial(wins) - logFactorial(trials - wins) + wins * Math.log(mean) + (trials - wins) * Math.log(1 - mean);
  },
};

describe.each(withLikelihood)("The AIC of a %s model", (family) => {
  it.each(kinds.filter(([name]) => name !== "local regression"))("is -2 ln L + 2 (corrected degrees + what else was estimated), written out: %s", (_name, terms) => {
    const isShare = family === "binomial";
    const share = rows.trials.map((trials, row) => Math.round(rows.share[row] * trials) / trials);
    const model = fit(family, terms, isShare ? { weights: "trials" } : {}, { ...rows, share });
    const own = isShare ? share : rows[modelOf(family, []).response as "y"];
    const likelihood = own.reduce((sum, value, row) => sum + densities[family as "gaussian"](value, model.fitted[row], model, row), 0);
    expect(model.logLikelihood).toBeCloseTo(likelihood, 6);
    const { posterior, places } = partsOf(model);
    const { plain, corrected, bound } = modelDegrees(posterior, places, model.dispersion);
    expect(plain).toBeCloseTo(model.edf, 5);
    expect(corrected).toBeGreaterThanOrEqual(plain - 1e-9);
    expect(corrected).toBeLessThanOrEqual(bound + 1e-9);
    const others = isShare ? 0 : 1;
    expect(aicOf(model)).toBeCloseTo(2 * (corrected + others - likelihood), 5);
  });

  it("does not depend on the order of rows or terms", () => {
    const terms = [...everyKind.smooth, ...everyKind.factor];
    const aic = aicOf(fit(family, terms));
    expect(aicOf(fit(family, [...terms].reverse()))).toBeCloseTo(aic, 3);
    expect(aicOf(fit(family, terms, {}, inOrder(rows, rows.y.map((_, row) => (row * 37 + 11) % 100))))).toBeCloseTo(aic, 3);
  });
});

describe("The AIC in another unit of the response", () => {
  const terms = [...everyKind.smooth, ...everyKind.circle, ...everyKind.factor];

  it("moves by 2 n ln(unit) for normal and lognormal responses, and not at all by a constant", () => {
    const times = (column: "y" | "sales", unit: number) => ({ ...rows, [column]: rows[column].map((value) => value * unit) });
    expect(aicOf(fit("gaussian", terms, {}, times("y", 10))) - aicOf(fit("gaussian", terms))).toBeCloseTo(200 * Math.log(10), 4);
    expect(aicOf(fit("log-gaussian", terms, {}, times("sales", 10))) - aicOf(fit("log-gaussian", terms))).toBeCloseTo(200 * Math.log(10), 4);
    expect(aicOf(fit("gaussian", terms, {}, { ...rows, y: rows.y.map((value) => value + 50) }))).toBeCloseTo(aicOf(fit("gaussian", terms)), 4);
  });

  it("is that of the share of those who did not", () => {
    const [one, other] = [fit("binomial", terms), fit("binomial", terms, {}, { ...rows, share: rows.share.map((value) => 1 - value) })];
    expect(aicOf(other)).toBeCloseTo(aicOf(one), 4);
  });
});

describe("There is no AIC", () => {
  it.each(kinds)("of quasi-Poisson counts, with the reason, nor a difference of two: %s", (_name, terms) => {
    const model = fit("quasi-poisson", terms);
    expect(modelReport(model)).toMatchObject({ aic: null, aicReason: "quasi families have no likelihood" });
    expect(compareModels(model, model).aicDifference).toBe(null);
  });

  it.each(withLikelihood)("beside a local regression, with the reason: %s", (family) => {
    expect(modelReport(fit(family, everyKind["local regression"]))).toMatchObject({ aic: null, aicReason: "local regression has no restricted likelihood to correct by" });
  });

  it.each(["gaussian", "log-gaussian"] as const)("of a fit that leaves nothing over, with the reason: %s", (family) => {
    const exact = { ...rows, y: rows.price, sales: rows.price.map(Math.exp) };
    expect(modelReport(fit(family, [{ kind: "linear", column: "price" }], {}, exact))).toMatchObject({
      aic: null, aicReason: "the model reproduces the response exactly, and its likelihood has no bound",
    });
  });

  it("but with a reservation of a curve of given shape, and none of others", () => {
    const shaped: TermSpec = { kind: "smooth", column: "price", size: 7, shape: "decreasing" };
    const { aic, aicReason } = modelReport(fit("gaussian", [shaped]));
    expect([Number.isFinite(aic), aicReason]).toEqual([true, "a curve of given shape is counted as if it were free to bend"]);
    expect(modelReport(fit("gaussian", everyKind.smooth)).aicReason).toBe(null);
  });
});
