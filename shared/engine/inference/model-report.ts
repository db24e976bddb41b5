import type { FittedModel, FittedTerm, ModelReport } from "../types";
import { basisRows } from "../basis/term-basis";
import { addRowsTimes } from "../linalg/sparse-rows";

/**
 * What a fitted model amounts to, per term and in all. Reads the model only.
 * Deviance explained is 1 - deviance / null deviance (of the model with intercept and offset only).
 *
 * @example modelReport(model).terms.map(({ id, edf }) => `${id}: ${edf.toFixed(1)}`);
 */
export function modelReport(model: FittedModel): ModelReport {
  const { deviance, nullDeviance } = model;
  return {
    rowCount: model.rowCount,
    edf: model.edf,
    terms: model.terms.map((term) => ({
      id: term.id,
      kind: term.kind,
      edf: term.edf,
      penalties: [...term.penalties],
      contributionRange: contributionRange(model, term),
    })),
    devianceExplained: nullDeviance > 0 ? 1 - deviance / nullDeviance : 0,
    dispersion: model.dispersion,
    criterion: model.criterion,
    converged: model.converged,
    warnings: model.warnings.map((warning) => ({ ...warning })),
  };
}

function contributionRange(model: FittedModel, term: FittedTerm): [number, number] {
  const rows = basisRows(term.basis, { [term.columns[0]]: term.seen.values });
  const contributions = new Float64Array(term.seen.values.length);
  addRowsTimes(rows, model.coefficients, term.first, contributions);
  return [
    contributions.reduce((least, value) => Math.min(least, value), Infinity),
    contributions.reduce((most, value) => Math.max(most, value), -Infinity),
  ];
}
