import { predict } from "@shared/engine";
import type { FittedModel, ModelData } from "@shared/engine";
import { expect } from "vitest";
import { largestDifference, largestRelativeDifference, standardDeviation } from "./measures";
import type { GamSummary } from "./reference-shapes";

/** Fitted in standard deviations, edf absolute, standard errors and dispersion relative. */
export type Tolerances = { fitted: number; edf: number; standardError: number };

/** Gaussian against gam(method = "REML"): as the engine's definition demands. */
export const gaussianTolerances: Tolerances = { fitted: 1e-5, edf: 1e-3, standardError: 1e-3 };
/** Others against bam(method = "fREML"): that one stops its penalty search at each working model, so it is looser. */
export const iterativeTolerances: Tolerances = { fitted: 1e-3, edf: 0.02, standardError: 1e-2 };

export type GamComparison = {
  model: FittedModel;
  data: ModelData;
  summary: GamSummary;
  /** Ids of our terms that have a smooth in the reference, each with the positions of its smooths there. */
  terms: Record<string, number[]>;
  within: Tolerances;
};

/** A model against common.R's summarise_gam at the rows both were fitted to. */
export function expectGamAgreement({ model, data, summary, terms, within }: GamComparison): void {
  const scale = standardDeviation(summary.linearPredictor);
  const prediction = predict(model, data);
  expect(model.converged).toBe(true);
  expect(largestDifference(prediction.linearPredictor, summary.linearPredictor) / scale).toBeLessThan(within.fitted);
  expect(largestRelativeDifference(prediction.standardError, summary.standardError)).toBeLessThan(within.standardError);
  for (const [id, positions] of Object.entries(terms)) {
    const expected = positions.reduce((sum, position) => sum + summary.edf[position], 0);
    expect(Math.abs(edfOf(model, id) - expected), `degrees of freedom of ${id}`).toBeLessThan(within.edf);
  }
  expect(Math.abs(model.edf - summary.totalEdf)).toBeLessThan(within.edf);
  expect(Math.abs(model.dispersion / summary.dispersion - 1)).toBeLessThan(within.standardError);
  expect(Math.abs(model.deviance / summary.deviance - 1)).toBeLessThan(within.fitted);
  expect(Math.abs(model.nullDeviance / summary.nullDeviance - 1)).toBeLessThan(within.fitted);
}

/** Effective degrees of freedom of a term, by its id. */
export function edfOf(model: FittedModel, id: string): number {
  const term = model.terms.find((one) => one.id === id);
  if (!term) throw new Error(`The model has no term ${id}.`);
  return term.edf;
}
