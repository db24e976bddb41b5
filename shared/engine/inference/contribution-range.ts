import { seenRows } from "../basis/seen-rows";
import { addRowsTimes } from "../linalg/sparse-rows";
import type { FittedModel, FittedTerm } from "../types";

/**
 * Smallest and largest contribution over the values a term was fitted to: groups with their own curves over their own
 * values, curves times a number and slopes by group per unit of that number.
 *
 * @example contributionRange(model, model.terms[0]); // [-0.4, 0.9]
 */
export function contributionRange(model: FittedModel, term: FittedTerm): [number, number] {
  const { rows, count } = seenRows(term);
  const contributions = new Float64Array(count);
  addRowsTimes(rows, model.coefficients, term.first, contributions);
  return [
    contributions.reduce((least, value) => Math.min(least, value), Infinity),
    contributions.reduce((most, value) => Math.max(most, value), -Infinity),
  ];
}
