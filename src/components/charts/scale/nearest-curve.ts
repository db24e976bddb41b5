import { curveValueAt } from "./curve-height";
import type { CurvePoint } from "./curve-height";
import type { Scale } from "./scale";

type Candidate = { id: string; points: readonly CurvePoint[] };
type Place = { x: number; y: number };

/** The curve drawn nearest to a pixel, measured straight up and down; undefined if none is within reach. */
export const nearestCurve = (
  curves: readonly Candidate[],
  place: Place,
  options: { x: Scale; y: Scale; reach?: number },
): string | undefined => {
  const { x, y, reach = 24 } = options;
  const value = x.toValue(place.x);
  let best: string | undefined;
  let bestDistance = reach;
  for (const curve of curves) {
    const distance = Math.abs(y.toPixel(curveValueAt(curve.points, value).estimate) - place.y);
    if (distance >= bestDistance) continue;
    best = curve.id;
    bestDistance = distance;
  }
  return best;
};
