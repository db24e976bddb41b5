import type { FittedModel, ModelSpec } from "@shared/engine";
import { fitModel, predict } from "@shared/engine";
import type { Browser } from "playwright-core";
import { fileURLToPath } from "node:url";
import { build } from "vite";
import type { Rollup } from "vite";
import { afterAll, beforeAll, expect, it } from "vitest";
import { everyKindRows, modelOf } from "../engine/support/every-kind-rows";
import { largestDifference } from "../engine/support/measures";
import { launchBrowser } from "../support/browser";

/** The engine as one script for a page, under a name of its own. */
async function engineScript(): Promise<string> {
  const at = (path: string) => fileURLToPath(new URL(`../../${path}`, import.meta.url));
  const output = await build({
    configFile: false, logLevel: "silent", resolve: { alias: { "@shared": at("shared") } },
    build: { write: false, minify: false, lib: { entry: at("shared/engine/index.ts"), formats: ["iife"], name: "shelftideEngine" } },
  }) as Rollup.RollupOutput[];
  return output[0].output[0].code;
}

let browser: Browser;
let script: string;

beforeAll(async () => {
  [browser, script] = await Promise.all([launchBrowser(), engineScript()]);
});
afterAll(async () => {
  await browser?.close();
});

const rows = everyKindRows(14);
const models: Record<string, ModelSpec> = {
  "curves, a circle and a factor": modelOf("quasi-poisson", [
    { kind: "smooth", column: "price", log: true, size: 8, shape: "decreasing" }, { kind: "cyclic-smooth", column: "season", period: [0, 1] },
    { kind: "factor", column: "promotion" },
  ]),
  "groups and a slowly moving level": modelOf("negative-binomial", [
    { kind: "smooth", column: "price", log: true, size: 6 }, { kind: "factor-smooth", column: "price", log: true, group: "store", size: 5 },
    { kind: "random-walk", column: "week" },
  ]),
  "a surface, a natural spline and a local regression": modelOf("gaussian", [
    { kind: "tensor-product", columns: ["price", "depth"] }, { kind: "natural-spline", column: "week", df: 3 },
    { kind: "local-regression", column: "temperature", span: 0.6 },
  ]),
};

type PageEngine = { fitModel: typeof fitModel; predict: typeof predict };

/** In the page: fits the model there and gives back its numbers. */
function fitInPage({ spec, data }: { spec: ModelSpec; data: typeof rows }) {
  const engine = (globalThis as unknown as { shelftideEngine: PageEngine }).shelftideEngine;
  const model = engine.fitModel(spec, data);
  const { mean, standardError, upper } = engine.predict(model, data, { interval: "observation" });
  return {
    coefficients: Array.from(model.coefficients), mean: Array.from(mean), standardError: Array.from(standardError), upper: Array.from(upper),
    scalars: [model.dispersion, model.edf, model.criterion, model.deviance, model.theta ?? 0, ...model.terms.flatMap(({ penalties }) => penalties.map(Math.log))],
  };
}

const scalarsOf = (model: FittedModel) =>
  [model.dispersion, model.edf, model.criterion, model.deviance, model.theta ?? 0, ...model.terms.flatMap(({ penalties }) => penalties.map(Math.log))];

// Both engines compute in the same doubles; what may differ are the last digits of exp, log and the like.
it.each(Object.entries(models))("A page and the server fit the same to 1e-12: %s", async (_name, spec) => {
  const page = await browser.newPage();
  await page.addScriptTag({ content: script });
  const there = await page.evaluate(fitInPage, { spec, data: rows });
  const model = fitModel(spec, rows);
  const here = predict(model, rows, { interval: "observation" });
  expect(largestDifference(there.coefficients, model.coefficients)).toBeLessThan(1e-12 * Math.max(1, ...model.coefficients.map(Math.abs)));
  for (const name of ["mean", "standardError", "upper"] as const) {
    expect(largestDifference(there[name], here[name])).toBeLessThan(1e-12 * Math.max(1, ...here[name]));
  }
  scalarsOf(model).forEach((value, k) => expect(Math.abs(there.scalars[k] - value)).toBeLessThan(1e-12 * Math.max(1, Math.abs(value))));
  await page.close();
});
