import type { TermBasis } from "../types";

/**
 * The basis of a term per unit of the number that multiplies it: a smooth times a column becomes the smooth itself, a slope
 * per group a level per group. Others stay as they are.
 *
 * @example basisRows(perUnit(term.basis), { price: [1.49] }); // needs no column of numbers to multiply by
 */
export function perUnit(basis: TermBasis): TermBasis {
  if (basis.kind === "random-effect") return { ...basis, by: null };
  if (basis.kind !== "scaled-smooth") return basis;
  const { column, log, size, lower, upper } = basis;
  return { kind: "smooth", column, log, size, lower, upper, centring: new Float64Array(size) };
}
