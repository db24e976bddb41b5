import { levelColumn, numberColumn } from "../basis/columns";
import { EngineError } from "../errors";
import { packedIndex } from "../linalg/packed-symmetric";
import { termCoordinates } from "../penalty/term-transform";
import type { FactorSmoothBasis, FittedModel, FittedTerm, GroupCovariance, ModelData, RandomEffectBasis, RandomWalkBasis } from "../types";
import { sharedCount } from "./model-covariance";

/** Weeks a slowly moving level is carried on beyond those it was fitted to. */
const farthestWeek = 520;

/** One coefficient of the extended model: where it stood (-1: it is new), and what it adds to the covariance. */
type Place = { source: number; prior: Prior | null; name: string };

/** Variance of its own: `key` names a set whose members share it, by `with` another member. */
type Prior = { key: string; with: (other: Prior) => number; at: number };

type Extension = { term: FittedTerm; basis: FittedTerm["basis"]; places: Place[] };

/**
 * The model with coefficients for what data hold that the fit did not: weeks beyond a slowly moving level's last (the level
 * stays, its variance grows by dispersion / penalty each week), and groups never seen (their mean is the chain's, their
 * variance that of groups around it). Several rows of one new week or group share its uncertainty.
 * Source: Harvey (1989), Forecasting, Structural Time Series Models and the Kalman Filter, section 2.3, for the level.
 *
 * @param data columns the model's terms read; only new weeks and groups matter.
 * @returns the model itself where nothing is new. Neither is changed.
 * @throws EngineError column-missing, column-kind, value-out-of-range for weeks more than 520 beyond.
 * @example covarianceQuadratic(extendModel(model, plan), gradient, gradient); // gradient of the extended model's length
 */
export function extendModel(model: FittedModel, data: ModelData): FittedModel {
  const extensions = model.terms.map((term) => extensionOf(model, term, data));
  if (extensions.every(({ term, places }) => places.length === term.count)) return model;
  const shared = sharedCount(model);
  const inOrder = [...extensions].sort((left, right) => left.term.first - right.term.first);
  const places: Place[] = [{ source: 0, prior: null, name: "intercept" }];
  const firsts = new Map<string, number>();
  for (const extension of inOrder) {
    firsts.set(extension.term.id, places.length);
    places.push(...extension.places);
  }
  const sharedPlaces = places.filter(({ source }, at) => isShared({ source, at }, inOrder, { firsts, shared }));
  const terms = extensions.map(({ term, basis, places: { length } }): FittedTerm =>
    ({ ...term, basis, first: firsts.get(term.id) ?? term.first, count: length }));
  return {
    ...model, terms,
    coefficients: Float64Array.from(places, ({ source }) => (source < 0 ? 0 : model.coefficients[source])),
    coefficientNames: places.map(({ name }) => name),
    covariance: extendedCovariance(model.covariance, sharedPlaces),
    groupCovariance: model.groupCovariance === null ? null
      : extendedGroups({ model, covariance: model.groupCovariance, terms, shared, sharedPlaces }),
  };
}

/** Shared terms come first, before and after. */
function isShared(
  { at }: { source: number; at: number }, inOrder: readonly Extension[], of: { firsts: Map<string, number>; shared: number },
): boolean {
  const firstGroup = inOrder.find(({ term }) => term.first >= of.shared);
  return firstGroup === undefined || at < (of.firsts.get(firstGroup.term.id) ?? Infinity);
}

function extensionOf(model: FittedModel, term: FittedTerm, data: ModelData): Extension {
  const { basis } = term;
  switch (basis.kind) {
    case "random-walk": return walkExtension(model, term, basis, data);
    case "random-effect": return groupExtension(model, term, { basis, rows: 1, column: basis.column, data });
    case "factor-smooth": return groupExtension(model, term, { basis, rows: basis.size, column: basis.group, data });
    default: return { term, basis, places: keptPlaces(model, term) };
  }
}

const keptPlaces = (model: FittedModel, term: FittedTerm): Place[] => Array.from({ length: term.count }, (_, k) =>
  ({ source: term.first + k, prior: null, name: model.coefficientNames[term.first + k] }));

function walkExtension(model: FittedModel, term: FittedTerm, basis: RandomWalkBasis, data: ModelData): Extension {
  const weeks = numberColumn(data, basis.column, "random-walk");
  let { first, last } = basis;
  weeks.forEach((week, row) => {
    const beyond = Math.max(week - basis.last, basis.first - week);
    if (beyond > farthestWeek) throw tooFar({ basis, week, row, beyond });
    first = Math.min(first, Math.floor(week));
    last = Math.max(last, Math.ceil(week));
  });
  const step = model.dispersion / term.penalties[0];
  const beyond = (side: "before" | "after", steps: number): Place => ({
    source: side === "after" ? term.first + term.count - 1 : term.first,
    prior: { key: `${term.id} ${side}`, at: steps, with: (other) => step * Math.min(steps, other.at) },
    name: `${term.id}[${side === "after" ? basis.last + steps : basis.first - steps}]`,
  });
  const places = [
    ...Array.from({ length: basis.first - first }, (_, k) => beyond("before", basis.first - first - k)),
    ...keptPlaces(model, term),
    ...Array.from({ length: last - basis.last }, (_, k) => beyond("after", k + 1)),
  ];
  const added = places.length - term.count;
  const centring = new Float64Array(places.length);
  centring.set(basis.centring, basis.first - first);
  return { term, basis: added === 0 ? basis : { ...basis, first, last, centring }, places };
}

function tooFar(of: { basis: RandomWalkBasis; week: number; row: number; beyond: number }): EngineError {
  const { basis, week, row, beyond } = of;
  return new EngineError(
    "value-out-of-range",
    `Column "${basis.column}" (random-walk): row ${row + 1} is ${week}, ${beyond} weeks from those fitted to `
      + `(${basis.first} to ${basis.last}); a level is carried on for at most ${farthestWeek}.`,
  );
}

type Grouped = { basis: RandomEffectBasis | FactorSmoothBasis; rows: number; column: string; data: ModelData };

function groupExtension(model: FittedModel, term: FittedTerm, of: Grouped): Extension {
  const { basis, rows, column, data } = of;
  const known = new Set(basis.levels);
  const fresh = [...new Set(levelColumn(data, column, term.kind))].filter((level) => !known.has(level));
  const prior = fresh.length === 0 ? new Float64Array(0) : priorCovariance(term, model.dispersion);
  const places = fresh.flatMap((level) => Array.from({ length: rows }, (_, k): Place => ({
    source: -1,
    prior: { key: `${term.id} ${level}`, at: k, with: (other) => prior[k * rows + other.at] },
    name: `${term.id}[${level}${rows === 1 ? "" : `, ${k + 1}`}]`,
  })));
  return { term, basis: fresh.length === 0 ? basis : { ...basis, levels: [...basis.levels, ...fresh] }, places: [...keptPlaces(model, term), ...places] };
}

/** T (penalties)^-1 T' x dispersion: how groups' coefficients scatter around the chain's. Row-major. */
function priorCovariance(term: FittedTerm, dispersion: number): Float64Array {
  const { transform, penalties } = termCoordinates(term.basis);
  if (transform.form !== "blocks") throw new Error("A term on groups has blocks for its transform.");
  const { matrix, rows, columns } = transform;
  const weights = new Float64Array(columns);
  penalties.forEach(({ start, end, diagonal }, j) => {
    for (let k = start; k < end; k++) weights[k] += term.penalties[j] * (diagonal?.[k - start] ?? 1);
  });
  const prior = new Float64Array(rows * rows);
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < rows; column++) {
      for (let k = 0; k < columns; k++) prior[row * rows + column] += (dispersion / weights[k]) * matrix[row * columns + k] * matrix[column * columns + k];
    }
  }
  return prior;
}

function extendedCovariance(covariance: Float64Array, places: readonly Place[]): Float64Array {
  const packed = new Float64Array((places.length * (places.length + 1)) / 2);
  let at = 0;
  places.forEach((place, row) => {
    for (let column = 0; column <= row; column++) {
      const other = places[column];
      const before = place.source < 0 || other.source < 0 ? 0 : covariance[packedIndex(place.source, other.source)];
      const own = place.prior !== null && other.prior?.key === place.prior.key ? place.prior.with(other.prior) : 0;
      packed[at++] = before + own;
    }
  });
  return packed;
}

type GroupParts = { model: FittedModel; covariance: GroupCovariance; terms: FittedTerm[]; shared: number; sharedPlaces: readonly Place[] };

/** New groups come after the known: no link to the shared coefficients, and the prior as their own covariance. */
function extendedGroups({ model, covariance, terms, shared, sharedPlaces }: GroupParts): GroupCovariance {
  const { size } = covariance;
  const grouped = terms.filter((term) => model.terms.some(({ id, first }) => id === term.id && first >= shared));
  const rowsOf = (term: FittedTerm) => (term.basis.kind === "factor-smooth" ? term.basis.size : 1);
  const count = grouped[0].count / rowsOf(grouped[0]);
  const link = new Float64Array(count * size * sharedPlaces.length);
  // A new shared coefficient moves with the one it was made from, through the shared covariance alone.
  sharedPlaces.forEach(({ source, prior }, column) => {
    if (prior !== null) return;
    for (let row = 0; row < covariance.count * size; row++) link[row * sharedPlaces.length + column] = covariance.link[row * shared + source];
  });
  const length = (size * (size + 1)) / 2;
  const own = new Float64Array(count * length);
  own.set(covariance.own);
  const priors = grouped.map((term) => ({ rows: rowsOf(term), values: priorCovariance(term, model.dispersion) }));
  for (let group = covariance.count; group < count; group++) writePriors(priors, own.subarray(group * length, (group + 1) * length));
  const places = grouped.flatMap((term) => Array.from({ length: rowsOf(term) }, (_, k) => ({ first: term.first + k, step: rowsOf(term) })));
  return { count, size, link, own, first: places.map(({ first }) => first), step: places.map(({ step }) => step) };
}

function writePriors(priors: readonly { rows: number; values: Float64Array }[], packed: Float64Array): void {
  let start = 0;
  for (const { rows, values } of priors) {
    for (let row = 0; row < rows; row++) {
      for (let column = 0; column <= row; column++) packed[packedIndex(start + row, start + column)] = values[row * rows + column];
    }
    start += rows;
  }
}
