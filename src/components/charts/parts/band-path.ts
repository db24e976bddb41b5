import type { CurvePoint } from "../scale/curve-height";
import type { Scale } from "../scale/scale";

type Axes = { x: Scale; y: Scale };
const at = (x: number, y: number) => `${x.toFixed(2)} ${y.toFixed(2)}`;

/** The outline of a band: along its upper edge and back along the lower. */
export const bandPath = (points: readonly CurvePoint[], { x, y }: Axes): string => {
  if (points.length < 2) return "";
  const upper = points.map((point) => at(x.toPixel(point.x), y.toPixel(point.upper)));
  const lower = points.map((point) => at(x.toPixel(point.x), y.toPixel(point.lower))).reverse();
  return `M${upper.join("L")}L${lower.join("L")}Z`;
};

/** A curve through its points, straight between them. */
export const linePath = (points: readonly { x: number; estimate: number }[], { x, y }: Axes): string =>
  points.length === 0 ? "" : `M${points.map((point) => at(x.toPixel(point.x), y.toPixel(point.estimate))).join("L")}`;
