import type { FittedModel, FittedTerm, ModelInformation, ModelReport, TermReport } from "../types";
import { concurvity } from "./concurvity";
import { contributionRange } from "./contribution-range";
import { informationCriterion } from "./information-criterion";
import { withCentredLevels } from "./level-centring";
import { rankDegrees } from "./penalty-share";
import { posteriorOf } from "./posterior";
import type { Posterior } from "./posterior";
import { termPlaces } from "./term-places";
import type { TermPlace } from "./term-places";
import { testTerm, testWithoutInformation } from "./term-tests";
import type { TermTests } from "./term-tests";

/**
 * What a fitted model amounts to, per term and in all. Reads the model only.
 * Deviance explained is 1 - deviance / null deviance (of the model with intercept and offset only).
 *
 * @returns per term its size, tests and what others reproduce of it (see `testTerm`, `concurvity`); in all the conditional
 * AIC (see `informationCriterion`). A curve of given shape is judged as if it were free to bend. Numbers that a model
 * cannot have are null, with the reason beside.
 * Cost: some products of size^3 per penalty: about a millisecond for one series, some tenths of a second for 100 shared
 * coordinates and 83 groups.
 * @example modelReport(model).terms.map(({ id, edf, test }) => `${id}: ${edf.toFixed(1)}, p = ${test?.pValue.toFixed(3)}`);
 */
export function modelReport(model: FittedModel): ModelReport {
  const { deviance, nullDeviance } = model;
  const information = model.information === null ? null : withCentredLevels(model, model.information);
  const places = information === null ? [] : termPlaces(model, information);
  const posterior = information === null ? null : posteriorOf(model, information);
  const { aic, reason: aicReason } = informationCriterion(model, posterior === null ? null : { posterior, places });
  const shared = information === null ? null : concurvity(model, information, places);
  return {
    rowCount: model.rowCount,
    edf: model.edf,
    terms: termReports(model, { information, places, posterior, shares: shared?.shares ?? [] }),
    devianceExplained: nullDeviance > 0 ? 1 - deviance / nullDeviance : 0,
    dispersion: model.dispersion,
    aic, aicReason,
    criterion: model.criterion,
    converged: model.converged,
    warnings: [...model.warnings, ...(shared?.warnings ?? [])].map((warning) => ({ ...warning })),
  };
}

type Findings = {
  information: ModelInformation | null;
  places: readonly TermPlace[];
  posterior: Posterior | null;
  shares: readonly (number | null)[];
};

function termReports(model: FittedModel, { information, places, posterior, shares }: Findings): TermReport[] {
  const setting = information === null || posterior === null
    ? null
    : { model, information, posterior, places, degrees: rankDegrees(posterior) };
  const testsOf = (term: FittedTerm, at: number): TermTests => {
    if (information === null) return testWithoutInformation(model, term);
    return setting === null ? { test: null, curveTest: null, reason: "the penalised system is singular to rounding" } : testTerm(setting, places[at]);
  };
  return model.terms.map((term, at): TermReport => {
    const tests = testsOf(term, at);
    return {
      id: term.id,
      kind: term.kind,
      edf: term.edf,
      penalties: [...term.penalties],
      contributionRange: contributionRange(model, term),
      test: tests.test,
      testReason: tests.reason,
      curveTest: tests.curveTest,
      concurvity: shares[at] ?? null,
    };
  });
}
