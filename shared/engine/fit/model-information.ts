import type { GroupInformation, ModelInformation } from "../types";
import type { Design } from "./design";
import type { WorkingFit } from "./working-fit";
import { derivatives } from "./penalty-search";

/**
 * X'WX of the last working model, the estimates and the criterion's second derivatives, all in fitting coordinates: what
 * tests, information criteria and influence are computed from.
 *
 * @example modelInformation(design, fit).size; // shared coordinates
 */
export function modelInformation(design: Design, fit: WorkingFit): ModelInformation {
  const { equations, solution, coordinates } = fit;
  const { size, unpenalised } = design;
  const shared = new Float64Array((size * (size + 1)) / 2);
  let at = 0;
  for (let row = 0; row < size; row++) {
    for (let column = 0; column <= row; column++) shared[at++] = equations.matrix[row * size + column];
  }
  return {
    unpenalised, size, shared,
    dropped: solution.system.dropped.map(({ column }) => column),
    coordinates: coordinates.shared,
    criterionHessian: derivatives(solution.search, "hessian").hessian.slice(),
    groups: groupInformation(fit),
  };
}

function groupInformation({ equations, coordinates }: WorkingFit): GroupInformation | null {
  if (equations.groups === null || coordinates.groups === null) return null;
  const { count, size, own, cross } = equations.groups;
  const packed = new Float64Array((count * size * (size + 1)) / 2);
  let at = 0;
  for (let group = 0; group < count; group++) {
    for (let row = 0; row < size; row++) {
      for (let column = 0; column <= row; column++) packed[at++] = own[(group * size + row) * size + column];
    }
  }
  return { count, size, own: packed, cross, coordinates: coordinates.groups };
}
