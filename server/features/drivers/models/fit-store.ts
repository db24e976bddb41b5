import type { FitSummary } from "@shared/contract/drivers";
import { fitModel, modelReport, predict, type FittedModel, type ModelSpec } from "@shared/engine";
import {
  defaultSpec,
  describeVariation,
  modelColumns,
  NO_EVENT,
  priceLearning,
  shownModel,
  toModelData,
  type DefaultSpec,
  type RowCounts,
  type SalesModelData,
  type SalesRow,
} from "@shared/planning";

/** One store's fit: the model with the band that intervals are shown with, the weeks it was fitted to (in the order of `model.fitted`), and what can be said of it. */
export type StoreFit = { model: FittedModel; rows: SalesRow[]; summary: FitSummary };

/**
 * Fits one product in one store; pure, and a matter of milliseconds. Every fit that is kept comes from here.
 *
 * @param weeks stored weeks of the product in the store; at least one.
 * @param spec null for the default specification that these weeks allow.
 * @throws EngineError, PlanningError where the weeks or the specification cannot be used.
 */
export function fitStore(
  { store, weeks, spec }: { store: string; weeks: readonly SalesRow[]; spec: ModelSpec | null },
): StoreFit {
  const learnt = toModelData(weeks);
  const chosen =
    spec === null ? defaultSpec(describeVariation(learnt.data)) : { spec, leftOut: [], straightLines: [] };
  const model = shownModel(fitModel(chosen.spec, learnt.data));
  return { model, rows: learnt.rows, summary: summarise({ store, weeks, learnt, chosen, model }) };
}

type Fitted = {
  store: string;
  weeks: readonly SalesRow[];
  learnt: SalesModelData;
  chosen: DefaultSpec;
  model: FittedModel;
};

function summarise({ store, weeks, learnt, chosen, model }: Fitted): FitSummary {
  const { rows, counts } = learnt;
  const days = rows.map((row) => row.week).sort();
  const report = modelReport(model);
  return {
    store,
    rows: rows.length,
    firstWeek: days[0],
    lastWeek: days[days.length - 1],
    devianceExplained: report.devianceExplained,
    dispersion: report.dispersion,
    edf: report.edf,
    converged: report.converged,
    warnings: [...report.warnings.map((warning) => warning.message), ...remarks(counts)],
    stockOuts: { leftOut: counts.soldOut, partly: counts.partlySoldOut },
    leftOut: chosen.leftOut,
    straightLines: chosen.straightLines,
    priceLearning: priceLearning(weeks),
    meanWeeklyUnits: mean(rows.map((row) => row.units)),
    meanBaseUnits: meanBaseUnits(model, rows),
  };
}

/** What people should know of the weeks that were left out or changed. */
function remarks(counts: RowCounts): string[] {
  const weeks = (count: number) => (count === 1 ? "1 week" : `${count} weeks`);
  const said: [number, string][] = [
    [counts.soldOut, "left out: sold out on every open day"],
    [counts.closed, "left out: the store did not open"],
    [counts.withoutPrice, "left out: the price is not known"],
    [counts.withoutTemperature, "left out: the temperature is not known"],
    [counts.netReturns, "modelled as zero: more came back than was sold"],
  ];
  return said.filter(([count]) => count > 0).map(([count, what]) => `${weeks(count)} ${what}.`);
}

/**
 * Mean over the fitted weeks of what they would have sold at regular price without promotion, in the weather and events
 * that were, open throughout. Null where the model cannot say (a level "none" it never saw, no regular price).
 */
function meanBaseUnits(model: FittedModel, rows: readonly SalesRow[]): number | null {
  const levelsOf = (column: string) => model.terms.find((term) => term.columns.includes(column))?.seen.values;
  const knowsNone = ["promotion", "mechanic"].every((column) => {
    const levels = levelsOf(column);
    return levels === undefined || Array.from(levels, String).includes("none");
  });
  const withPrice = rows.filter((row) => row.regularPrice !== null && row.regularPrice > 0);
  if (!knowsNone || withPrice.length === 0) return null;
  const cells = withPrice.map((row) => ({
    store: row.store,
    week: row.week,
    price: Number(row.regularPrice),
    regularPrice: row.regularPrice,
    promotion: "none" as const,
    mechanic: "none" as const,
    deal: 0 as const,
    event: row.event ?? NO_EVENT,
    temperatureC: row.temperatureC,
    exposure: 1,
  }));
  const base = mean(Array.from(predict(model, modelColumns(cells)).mean));
  return Number.isFinite(base) ? base : null;
}

function mean(values: readonly number[]): number {
  return values.reduce((total, value) => total + value, 0) / values.length;
}
