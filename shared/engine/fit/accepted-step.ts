import type { CoefficientMap } from "./coefficient-map";
import type { Design } from "./design";
import type { Coordinates } from "./predictor";
import { coefficientsAt, predictorOf } from "./predictor";
import { devianceOf } from "./rest";
import type { FamilyRows } from "./rest";

/** Few fits take as many working models; those that do swing between two, and come to rest by shorter steps. */
const patience = 40;

/**
 * Share of the way to a working model's estimates that is gone: a half after `patience` working models, then a quarter.
 *
 * @example shareOfStep(1); // 1
 */
export const shareOfStep = (iterations: number): number => (iterations <= patience ? 1 : iterations <= 2 * patience ? 0.5 : 0.25);

type Step = {
  from: Coordinates | null; to: Coordinates; predictor: Float64Array; theta: number; penalty: number; share: number; deviance: number | null;
};

/** Where a step ended; its deviance where it was needed. */
export type AcceptedStep = { predictor: Float64Array; coordinates: Coordinates; deviance: number | null };

type Problem = FamilyRows & { design: Design; map: CoefficientMap };

/**
 * Halves a step that raises the penalised deviance beyond reason: far from the answer a full step can overshoot.
 *
 * @param step.from estimates before, null at the first. step.predictor, step.penalty and step.deviance: linear predictor, b'Sb
 * and deviance there, null where it is not known.
 * @example acceptableStep(problem, { from, to, predictor, theta: 1, penalty, share: 1, deviance: null }).coordinates;
 */
export function acceptableStep(problem: Problem, step: Step): AcceptedStep {
  const { from, theta, share } = step;
  let coordinates = from === null || share === 1 ? step.to : between(from, step.to, share);
  let predictor = predictorAt(problem, coordinates);
  if (from === null) return { predictor, coordinates, deviance: null };
  const before = (step.deviance ?? devianceOf(problem, step.predictor, theta)) + step.penalty;
  let deviance: number | null = null;
  for (let halving = 0; halving < 20; halving++) {
    deviance = devianceOf(problem, predictor, theta);
    if (Number.isFinite(deviance) && deviance <= 2 * before + 1e-8 && farthest(predictor, step.predictor) <= longestMove) break;
    coordinates = between(from, coordinates, 0.5);
    predictor = predictorAt(problem, coordinates);
    deviance = null;
  }
  return { predictor, coordinates, deviance };
}

const predictorAt = ({ design, map, rows }: Problem, at: Coordinates): Float64Array =>
  predictorOf(design, coefficientsAt(design, map, at), rows.offset);

/** Factor exp(6) of a mean in one step: a deviance that rises with its logarithm only would not stop it. */
const longestMove = 6;

function farthest(next: Float64Array, before: Float64Array): number {
  let most = 0;
  for (let row = 0; row < next.length; row++) most = Math.max(most, Math.abs(next[row] - before[row]));
  return most;
}

function between(from: Coordinates, to: Coordinates, share: number): Coordinates {
  return {
    shared: partWay(from.shared, to.shared, share),
    groups: to.groups && from.groups && partWay(from.groups, to.groups, share),
  };
}

const partWay = (from: Float64Array, to: Float64Array, share: number): Float64Array =>
  from.map((value, k) => value + share * (to[k] - value));
