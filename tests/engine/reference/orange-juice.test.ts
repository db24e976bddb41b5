import { execFile } from "node:child_process";
import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { promisify } from "node:util";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { createModel } from "@shared/contract/drivers";
import type { ExtractKind } from "@shared/contract/extract-kinds";
import type { Extract } from "@shared/contract/extracts";
import type { ModelSpec, TermSpec } from "@shared/engine";
import { answerOf, type ApiClient } from "../../../demo/load/api-client";
import { loadFile } from "../../../demo/load/load-extract";
import { startRunningApp, type RunningApp } from "../../support/running-app";
import { clientWithToken } from "./orange-juice/client-with-token";
import type { ReferenceFits, ReferenceModel } from "./orange-juice/reference-fits";

/*
 * The whole way of real sales, from a file to a model, by HTTP on an empty installation: see orange-juice.R for the
 * data and orange-juice/fits.R for what R makes of the very same file.
 */
const here = fileURLToPath(new URL(".", import.meta.url));
const store = "002";
const productCodes = Array.from({ length: 11 }, (_, index) => `OJ${String(index + 1).padStart(2, "0")}`);

let folder = "";
let app: RunningApp;
let client: ApiClient;
let reference: ReferenceFits;
const loaded: Partial<Record<ExtractKind, Extract>> = {};

async function runR(script: string, args: string[]): Promise<string> {
  const { stdout } = await promisify(execFile)("Rscript", [join(here, script), ...args], { maxBuffer: 64 * 1024 ** 2 });
  return stdout;
}

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), "orange-juice-"));
  await runR("orange-juice.R", [folder]);
  reference = JSON.parse(await runR("orange-juice/fits.R", [folder, store])) as ReferenceFits;
  app = await startRunningApp();
  client = await clientWithToken(app, { weekStart: 4 });
  for (const kind of ["stores", "products", "sales"] as const) {
    loaded[kind] = await loadFile(client, { path: join(folder, `${kind}.csv`), kind });
  }
});

afterAll(async () => {
  await app?.stop();
  if (folder) await rm(folder, { recursive: true });
});

async function fit(product: string, spec: ModelSpec) {
  const answer = await client.call({ method: "POST", path: "/api/models", json: { product, stores: [store], spec } });
  expect(answer.status).toBe(201);
  return answerOf(createModel, answer);
}

const curves: TermSpec[] = [
  { kind: "smooth", column: "price", log: true, size: 8 },
  { kind: "cyclic-smooth", column: "yearFraction", period: [0, 1], size: 12 },
  { kind: "linear", column: "deal" },
  { kind: "factor", column: "promotion", reference: "none" },
];

/** Largest difference between fitted values, week by week, in standard deviations of the response. */
function largestGap(fitted: { week: string; value: number }[], expected: ReferenceModel): number {
  expect(fitted.map(({ week }) => week)).toEqual(expected.weeks);
  return Math.max(...fitted.map(({ value }, index) => Math.abs(value - expected.fitted[index]) / expected.spread));
}

describe("The orange-juice data, from file to model", () => {
  it("is loaded whole: 83 stores, 11 products and 106,139 sales rows, the weeks beginning on Thursday", () => {
    expect(loaded.stores?.rows).toMatchObject({ read: 83, usable: 83, errors: 0 });
    expect(loaded.products?.rows).toMatchObject({ read: 11, usable: 11, errors: 0 });
    expect(loaded.sales?.rows).toMatchObject({ read: 106_139, usable: 106_139, errors: 0 });
    expect(loaded.sales).toMatchObject({ state: "loaded", firstWeek: "1990-06-14", lastWeek: "1992-10-01" });
  });

  it.each(productCodes)("gives %s the elasticity of least squares on the logarithms, below zero", async (product) => {
    const { coefficients } = await fit(product, {
      response: "units", family: "log-gaussian", terms: [{ kind: "linear", column: "price", log: true }],
    });
    const elasticity = coefficients.find(({ name }) => name !== "intercept")?.value ?? Number.NaN;
    expect(Math.abs(elasticity - reference.products[product].loglog.elasticity)).toBeLessThan(1e-6);
    expect(elasticity).toBeLessThan(0);
  });

  it.each(productCodes)("fits %s's log units to a hundred-thousandth of mgcv's", async (product) => {
    const expected = reference.products[product].gaussian;
    const model = await fit(product, { response: "units", family: "log-gaussian", terms: curves });
    // What is fitted is the mean, exp(eta + dispersion / 2).
    const logs = model.fitted.map(({ week, value }) => ({ week, value: Math.log(value) - expected.dispersion / 2 }));
    expect(largestGap(logs, expected)).toBeLessThan(1e-5);
    expect(Math.abs(model.edf - expected.edf)).toBeLessThan(1e-3);
  });

  it.each(productCodes)("fits %s's units, quasi-Poisson, to a thousandth of mgcv's", async (product) => {
    const expected = reference.products[product].quasiPoisson;
    const model = await fit(product, { response: "units", family: "quasi-poisson", terms: curves });
    expect(largestGap(model.fitted, expected)).toBeLessThan(1e-3);
    expect(Math.abs(model.edf - expected.edf)).toBeLessThan(0.02);
  });
});
