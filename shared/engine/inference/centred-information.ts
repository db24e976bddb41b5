import { packedIndex } from "../linalg/packed-symmetric";
import { termCoordinates } from "../penalty/term-transform";
import type { FittedModel, FittedTerm, LevelledSmoothBasis, ModelInformation } from "../types";
import type { TermPlace } from "./term-places";

/**
 * X'WX of a term's columns as they stand in the model: centred over the rows where the kind is, each level's own curve over
 * that level's rows. Fitting coordinates are not centred (the intercept makes up for it), tests and shares are of what is.
 *
 * @param place of a term whose coordinates are shared.
 * @returns row-major, positions x positions. O(positions^2).
 * @example centredInformation(model, information, place)[0]; // weighted sum of squares of the first centred column
 */
export function centredInformation(model: FittedModel, information: ModelInformation, place: TermPlace): Float64Array {
  const { positions } = place;
  const width = positions.length;
  const entry = (row: number, column: number): number => information.shared[packedIndex(row, column)];
  const matrix = new Float64Array(width * width);
  for (let row = 0; row < width; row++) {
    for (let column = 0; column < width; column++) matrix[row * width + column] = entry(positions[row], positions[column]);
  }
  for (const { members, means, weight } of centrings(model, information, place)) {
    for (const row of members) {
      for (const column of members) {
        matrix[row * width + column] += means[row] * means[column] * weight
          - means[row] * entry(0, positions[column]) - means[column] * entry(0, positions[row]);
      }
    }
  }
  return matrix;
}

/** Coordinates that are centred together, the means of their columns, and the total weight of the rows centred over. */
type Centring = { members: number[]; means: Float64Array; weight: number };

function centrings(model: FittedModel, information: ModelInformation, place: TermPlace): Centring[] {
  const { basis } = place.term;
  if (!("centring" in basis)) return [];
  const { transform, unpenalised, penalised } = termCoordinates(basis);
  if (transform.form === "dense") {
    const width = unpenalised + penalised;
    const means = Float64Array.from(place.own, (own) => {
      let sum = 0;
      for (let k = 0; k < basis.centring.length; k++) sum += basis.centring[k] * transform.matrix[k * width + own];
      return sum;
    });
    return [{ members: place.own.map((_own, k) => k), means, weight: information.shared[0] }];
  }
  if (transform.form !== "blocks" || basis.kind !== "levelled-smooth") return [];
  const { rows, columns, unpenalised: lines } = transform;
  const weights = levelWeights(model, information, basis);
  const placeOf = (own: number) => {
    const isLine = own < unpenalised;
    const within = isLine ? lines : columns - lines;
    const at = isLine ? own : own - unpenalised;
    return { level: Math.floor(at / within), column: (isLine ? 0 : lines) + (at % within) };
  };
  return basis.levels.map((_level, level) => {
    const means = new Float64Array(place.own.length);
    const members = place.own.flatMap((own, k) => (placeOf(own).level === level ? [k] : []));
    for (const k of members) {
      const { column } = placeOf(place.own[k]);
      for (let i = 0; i < rows; i++) means[k] += basis.centring[level * rows + i] * transform.matrix[i * columns + column];
    }
    return { members, means, weight: weights[level] };
  });
}

/** Total weight of each level's rows, read from the factor that stands beside curves per level. */
function levelWeights(model: FittedModel, information: ModelInformation, basis: LevelledSmoothBasis): Float64Array {
  const weights = new Float64Array(basis.levels.length);
  const factor = model.terms.find((term): term is FittedTerm => term.basis.kind === "factor" && term.basis.column === basis.by);
  if (factor?.basis.kind !== "factor") return weights;
  const { levels, reference } = factor.basis;
  let rest = information.shared[0];
  let position = factor.layout.unpenalisedFirst;
  for (const level of levels) {
    if (level === reference) continue;
    const weight = information.shared[packedIndex(position, position)];
    rest -= weight;
    weights[basis.levels.indexOf(level)] = weight;
    position++;
  }
  weights[basis.levels.indexOf(reference)] = rest;
  return weights;
}
