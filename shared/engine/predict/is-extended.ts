import type { FittedModel } from "../types";

/**
 * Whether a model has coefficients for weeks or groups that its fit had not.
 *
 * @example isExtended(extendModel(model, { week: [model.terms[0].basis.last + 1] })); // true
 */
export const isExtended = ({ terms }: FittedModel): boolean => terms.some(({ basis, seen, observedRange }) => {
  switch (basis.kind) {
    case "random-walk": return observedRange !== null && (basis.first < observedRange[0] || basis.last > observedRange[1]);
    case "random-effect": return basis.levels.length > seen.counts.length;
    case "factor-smooth": return basis.levels.length > (seen.byLevel?.length ?? Infinity);
    default: return false;
  }
});
