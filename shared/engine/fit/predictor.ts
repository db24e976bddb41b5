import { addRowsTimes } from "../linalg/sparse-rows";
import { applyMap } from "./coefficient-map";
import type { CoefficientMap } from "./coefficient-map";
import type { Design } from "./design";
import { applyGroupTransforms } from "./group-covariance";

/** Estimates in fitting coordinates: shared ones, and the groups' one group after the other. */
export type Coordinates = { shared: Float64Array; groups: Float64Array | null };

/** All coefficients at given coordinates: shared terms first, then terms on eliminated groups. */
export function coefficientsAt(design: Design, map: CoefficientMap, coordinates: Coordinates): Float64Array {
  const coefficients = new Float64Array(design.rawSize);
  coefficients.set(applyMap(map, coordinates.shared));
  if (coordinates.groups !== null) applyGroupTransforms(design, coordinates.groups, coefficients);
  return coefficients;
}

/** Linear predictor of the fitted rows: offset + X x coefficients. O(n x terms). */
export function predictorOf(design: Design, coefficients: Float64Array, offset: Float64Array): Float64Array {
  const predictor = offset.slice();
  for (const part of design.parts) addRowsTimes(part.rows, coefficients, part.rawFirst, predictor);
  for (const part of design.groups?.parts ?? []) addRowsTimes(part.rows, coefficients, part.rawFirst, predictor);
  return predictor;
}
