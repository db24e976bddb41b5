import type { FittedModel, ModelInformation, ModelWarning } from "../types";
import { placedPenalties } from "./term-places";
import type { TermPlace } from "./term-places";
import { informationTimes, projectedSquares } from "./projection";
import type { CoordinateVector, Target } from "./projection";

/** Share from which a term is warned of. */
const warnAbove = 0.8;
/** Share of the predictor's variance below which a term's estimate is rounding. */
const smallestShare = 1e-12;
/** Shared coordinates beyond which shares would take longer than the fit. */
const mostCoordinates = 300;

export type Concurvity = { shares: (number | null)[]; warnings: ModelWarning[] };

/**
 * For each term the share of its fitted values f that all other terms reproduce, with the weights of the fit and the
 * intercept taken out of both: |P f|^2 / |f|^2, P the projection on all their columns. Terms that stand for random
 * deviations (groups, random walks) reproduce only at the price of their fitted penalties, or they would reproduce
 * everything; a term's own deviations by group are left out of the others. Above 0.8 a warning names the single term that
 * reproduces most.
 * Source: Hastie & Tibshirani (1990), section 5.4 (the idea); Ramsay, Burnett & Krewski (2003), Epidemiology 14, 18-23.
 *
 * @returns one share per term in order, null for an estimate of zero. O(terms x size^3).
 * @example concurvity(model, information, places).shares[0];
 */
export function concurvity(model: FittedModel, information: ModelInformation, places: readonly TermPlace[]): Concurvity {
  if (information.size > mostCoordinates) return { shares: places.map(() => null), warnings: [] };
  const ridges = randomRidges(model, information);
  const warnings: ModelWarning[] = [];
  const whole = centredSquares(information, estimateOf(information, places));
  const shares = places.map((place) => {
    const f = estimateOf(information, [place]);
    const { squares, gradient, intercept } = centredSquares(information, f);
    // Taking the intercept off costs digits: what is left must be more than their rounding.
    if (!(squares > smallestShare * Math.max(whole.squares, intercept))) return null;
    const others = places.filter((other) => other !== place && !isDeviationOf(other, place));
    if (others.length === 0) return 0;
    const shareOf = (among: readonly TermPlace[]) =>
      clamp((projectedSquares(information, gradient, targetOf(among, ridges)) - intercept) / squares);
    const share = shareOf(others);
    if (share > warnAbove) warnings.push(warningOf(place, share, others.map((other) => ({ id: other.term.id, share: shareOf([other]) }))));
    return share;
  });
  return { shares, warnings };
}

const clamp = (share: number): number => Math.min(1, Math.max(0, share));

function estimateOf(information: ModelInformation, places: readonly TermPlace[]): CoordinateVector {
  const { groups, coordinates, size } = information;
  const f: CoordinateVector = { shared: new Float64Array(size), grouped: new Float64Array(groups === null ? 0 : groups.count * groups.size) };
  for (const { isGrouped, positions } of places) {
    for (const position of positions) {
      if (!isGrouped) f.shared[position] = coordinates[position];
      else for (let line = position; groups !== null && line < f.grouped.length; line += groups.size) f.grouped[line] = groups.coordinates[line];
    }
  }
  return f;
}

/** |f|^2 less its mean's part `intercept`, and X'Wf. */
function centredSquares(information: ModelInformation, f: CoordinateVector) {
  const gradient = informationTimes(information, f);
  const intercept = gradient.shared[0] ** 2 / information.shared[0];
  let squares = -intercept;
  for (let k = 0; k < f.shared.length; k++) squares += f.shared[k] * gradient.shared[k];
  for (let k = 0; k < f.grouped.length; k++) squares += f.grouped[k] * gradient.grouped[k];
  return { squares, gradient, intercept };
}

const randomKinds: readonly string[] = ["random-effect", "factor-smooth", "random-walk"];

/** Penalties of terms that stand for random deviations, by position. */
function randomRidges(model: FittedModel, information: ModelInformation): { shared: Float64Array; grouped: Float64Array } {
  const random = new Set(model.terms.filter(({ kind }) => randomKinds.includes(kind)).map(({ id }) => id));
  const ridges = { shared: new Float64Array(information.size), grouped: new Float64Array(information.groups?.size ?? 0) };
  for (const { termId, isGrouped, positions, diagonal, multiplier } of placedPenalties(model)) {
    if (!random.has(termId)) continue;
    positions.forEach((position, k) => { (isGrouped ? ridges.grouped : ridges.shared)[position] += multiplier * diagonal[k]; });
  }
  return ridges;
}

/** Whether a term is another's deviation by group: a curve per group of its column, or a slope per group in it. */
function isDeviationOf({ term: { basis } }: TermPlace, { term }: TermPlace): boolean {
  if (basis.kind === "factor-smooth") return basis.column === term.columns[0] && term.kind !== "factor-smooth";
  return basis.kind === "random-effect" && basis.by !== null && basis.by === term.columns[0];
}

function targetOf(places: readonly TermPlace[], ridges: { shared: Float64Array; grouped: Float64Array }): Target {
  const shared = places.filter(({ isGrouped }) => !isGrouped).flatMap(({ positions }) => positions);
  const grouped = places.filter(({ isGrouped }) => isGrouped).flatMap(({ positions }) => positions);
  return {
    shared: [0, ...shared].map((position) => ({ position, ridge: ridges.shared[position] })),
    grouped: grouped.map((position) => ({ position, ridge: ridges.grouped[position] })),
  };
}

function warningOf({ term }: TermPlace, share: number, alone: { id: string; share: number }[]): ModelWarning {
  const most = alone.reduce((best, other) => (other.share > best.share ? other : best));
  return {
    code: "concurvity", term: term.id,
    message: `Other terms reproduce ${percent(share)} of what "${term.id}" shows ("${most.id}" alone ${percent(most.share)}): `
      + "these data can hardly tell them apart.",
  };
}

const percent = (share: number): string => `${Math.floor(100 * share)} %`;
