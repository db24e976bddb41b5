import { addRowsTimes } from "../linalg/sparse-rows";
import { applyMap } from "./coefficients";
import type { CoefficientMap } from "./coefficients";
import type { Design } from "./design";

/** Linear predictor of the fitted rows: offset + X x coefficients. O(n x terms). */
export function predictorOf(design: Design, map: CoefficientMap, coordinates: Float64Array, offset: Float64Array): Float64Array {
  const coefficients = applyMap(map, coordinates);
  const predictor = offset.slice();
  for (const part of design.parts) addRowsTimes(part.rows, coefficients, part.rawFirst, predictor);
  return predictor;
}
