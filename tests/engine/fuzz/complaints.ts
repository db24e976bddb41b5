import { columnsOf, EngineError, fitModel, modelReport, parseModel, predict, residuals, serialiseModel, termCurve, termSurface } from "@shared/engine";
import type { FittedModel, FittedTerm, ModelData, ModelSpec, Prediction } from "@shared/engine";
import { termId } from "@shared/engine/basis/term-basis";
import { strangeRows } from "./any-data";

/** Processor time one specification may take, in milliseconds: far above any, far below a hang. */
const longest = 5000;

export type Outcome = { model: FittedModel | null; complaints: string[] };

/** Fits, asks a model all there is to ask, and lists what is wrong: nothing, where all holds. */
export function judge(spec: ModelSpec, data: ModelData): Outcome {
  const before = process.cpuUsage();
  const outcome = judgeFit(spec, data);
  const { user, system } = process.cpuUsage(before);
  const spent = (user + system) / 1000;
  return spent < longest ? outcome : { ...outcome, complaints: [...outcome.complaints, `took ${Math.round(spent)} ms of processor time`] };
}

function judgeFit(spec: ModelSpec, data: ModelData): Outcome {
  const untouched = JSON.stringify({ spec, data });
  let model: FittedModel;
  try {
    model = fitModel(spec, data);
  } catch (error) {
    return { model: null, complaints: aboutError(error, spec, data, "fit") };
  }
  const complaints = [
    ...notFinite(model, "model"), ...aboutEnd(model), ...aboutText(model), ...asked("report", spec, data, () => notFinite(modelReport(model), "report")),
    ...aboutRows(model, data, "own rows"), ...aboutRows(model, strangeRows(data), "strange rows"), ...aboutFitted(model, data), ...aboutGiven(model),
    ...model.terms.flatMap((term) => aboutTerm(model, term, data)), ...aboutResiduals(model, data),
  ];
  if (JSON.stringify({ spec, data }) !== untouched) complaints.push("what was given is not as it was");
  return { model, complaints };
}

/** Complaints of a question to a model, which may be refused as a fit may. */
function asked(what: string, spec: ModelSpec, data: ModelData, question: () => string[]): string[] {
  try {
    return question().map((complaint) => `${what}: ${complaint}`);
  } catch (error) {
    return aboutError(error, spec, data, what);
  }
}

/** An error has to be the engine's own, and name a column, term, value or count of this very case. */
export function aboutError(error: unknown, spec: ModelSpec, data: ModelData, what: string): string[] {
  if (!(error instanceof EngineError)) return [`${what}: ${error instanceof Error ? (error.stack ?? error.message) : String(error)}`];
  const terms = spec.terms.flatMap((term): string[] => [
    termId(term), ...columnsOf(term),
  ]);
  const names = [spec.response, spec.offset ?? "", spec.weights ?? "", ...terms].filter((name) => name !== "").map((name) => `"${name}"`);
  const rows = Object.values(data)[0]?.length ?? 0;
  const kept = spec.weights === undefined ? rows : Array.from<number | string>(data[spec.weights] ?? []).filter((weight) => Number(weight) > 0).length;
  const causes = [...names, `${kept} rows`];
  return causes.some((cause) => error.message.includes(cause)) ? [] : [`${what}: the message names no cause: ${error.message}`];
}

/** Where a number in plain data is not finite. */
export function notFinite(value: unknown, path: string): string[] {
  if (typeof value === "number") return Number.isFinite(value) ? [] : [`${path} is ${value}`];
  if (value instanceof Float64Array) {
    const at = value.findIndex((own) => !Number.isFinite(own));
    return at < 0 ? [] : [`${path}[${at}] is ${value[at]}`];
  }
  if (value === undefined) return [`${path} is undefined`];
  if (typeof value !== "object" || value === null || ArrayBuffer.isView(value)) return [];
  return Object.entries(value).flatMap(([key, own]) => (own === undefined && path.startsWith("report") ? [] : notFinite(own, `${path}.${key}`)));
}

function aboutEnd({ converged, warnings, terms }: FittedModel): string[] {
  // A local regression is no projection, and a shape is held by a finite weight: their traces may fall a little below zero.
  const spent = terms.find(({ edf }) => edf < -0.1);
  if (spent !== undefined) return [`${spent.id} has ${spent.edf} degrees of freedom`];
  const isSaid = warnings.some(({ code }) => code === "not-converged");
  return converged === isSaid ? [`converged is ${converged}, and the warnings are ${JSON.stringify(warnings)}`] : [];
}

function aboutText(model: FittedModel): string[] {
  const text = serialiseModel(model);
  return serialiseModel(parseModel(text)) === text ? [] : ["the text read again is another"];
}

function aboutRows(model: FittedModel, data: ModelData, what: string): string[] {
  const intervals = model.spec.family === "binomial" ? (["mean"] as const) : (["mean", "observation"] as const);
  return intervals.flatMap((interval) => asked(`${what}, ${interval}`, model.spec, data, () => aboutPrediction(predict(model, data, { interval, level: 0.9 }))));
}

/** Largest share of the parts' sizes by which their sum may miss the predictor. */
const rounding = 1e-8;

function aboutPrediction(prediction: Prediction): string[] {
  const { lower, upper, linearPredictor, contributions, standardError } = prediction;
  const complaints = notFinite(prediction, "prediction");
  const crossed = lower.findIndex((value, row) => !(value <= upper[row]));
  if (crossed >= 0) complaints.push(`row ${crossed + 1}: from ${lower[crossed]} to ${upper[crossed]}`);
  if (standardError.some((value) => value < 0)) complaints.push("a standard error is below zero");
  const parts = Object.values(contributions);
  const apart = linearPredictor.findIndex((value, row) => {
    const size = parts.reduce((sum, part) => sum + Math.abs(part[row]), 1e-300);
    return !(Math.abs(parts.reduce((sum, part) => sum + part[row], 0) - value) <= rounding * size);
  });
  if (apart >= 0) complaints.push(`row ${apart + 1}: contributions do not sum to ${linearPredictor[apart]}`);
  return complaints;
}

/** Prediction of the rows fitted to is what the fit says of them, but for the rounding of large parts. */
function aboutFitted(model: FittedModel, data: ModelData): string[] {
  const { mean, contributions } = predict(model, data);
  const parts = Object.values(contributions);
  const apart = model.fitted.findIndex((value, row) => {
    const size = parts.reduce((sum, part) => sum + Math.abs(part[row]), 1);
    return !(Math.abs(value - mean[row]) <= 1e-8 * size * Math.abs(value) + 1e-12 * size);
  });
  return apart < 0 ? [] : [`row ${apart + 1}: fitted ${model.fitted[apart]}, predicted ${mean[apart]}`];
}

/** Penalties given are the penalties had, or a warning says otherwise. */
function aboutGiven({ spec, terms, warnings }: FittedModel): string[] {
  return terms.flatMap(({ id, penalties }, at): string[] => {
    const term = spec.terms[at];
    if (!("smoothness" in term) || typeof term.smoothness !== "object" || !("penalty" in term.smoothness)) return [];
    const { penalty } = term.smoothness;
    if (warnings.some((warning) => warning.code === "penalty-raised" && warning.term === id)) return [];
    return penalties.every((own) => Math.abs(own / penalty - 1) < 1e-9) ? [] : [`penalties of ${id} are ${penalties.join(", ")}, given was ${penalty}`];
  });
}

function aboutTerm(model: FittedModel, { id, kind, basis }: FittedTerm, data: ModelData): string[] {
  const { spec } = model;
  if (kind === "tensor-product") return asked(`surface of ${id}`, spec, data, () => notFinite(termSurface(model, id, { points: 4 }), "surface"));
  const group = basis.kind === "levelled-smooth" || basis.kind === "factor-smooth" ? basis.levels[basis.levels.length - 1] : undefined;
  return asked(`curve of ${id}`, spec, data, () => {
    const curve = termCurve(model, id, { points: 7, derivative: true, ...(group === undefined ? {} : { group }) });
    const crossed = curve.lower.findIndex((value, k) => !(value <= curve.estimate[k] && curve.estimate[k] <= curve.upper[k]));
    return [...notFinite(curve, "curve"), ...(crossed < 0 ? [] : [`the band at ${curve.x[crossed]} does not hold the curve`])];
  });
}

function aboutResiduals(model: FittedModel, data: ModelData): string[] {
  return (["deviance", "pearson", "quantile", "response"] as const).flatMap((kind) =>
    asked(`${kind} residuals`, model.spec, data, () => notFinite(residuals(model, data, { kind }), "residuals")));
}
