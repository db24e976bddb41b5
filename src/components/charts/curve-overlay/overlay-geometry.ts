import type { CurvePoint } from "../scale/curve-height";
import { ratioDomain } from "../scale/ratio-domain";
import { ratioTicks } from "../scale/ratio-ticks";
import { linearScale, logScale } from "../scale/scale";
import type { Scale } from "../scale/scale";

export type OverlayGeometry = {
  width: number;
  height: number;
  margin: { top: number; right: number; bottom: number; left: number };
  innerWidth: number;
  innerHeight: number;
  x: Scale;
  y: Scale;
  yTicks: number[];
};

type OverlayGeometryOptions = {
  width: number;
  height: number;
  domain: readonly [number, number];
  curves: readonly (readonly CurvePoint[])[];
};

const margin = { top: 14, right: 28, bottom: 46, left: 58 };

/** Scales that hold every store's curve; bands of single stores are clipped rather than setting the height. */
export const overlayGeometry = ({ width, height, domain, curves }: OverlayGeometryOptions): OverlayGeometry => {
  const innerWidth = Math.max(80, width - margin.left - margin.right);
  const innerHeight = height - margin.top - margin.bottom;
  const lines = curves.flatMap((points) =>
    points
      .filter((point) => point.x >= domain[0] && point.x <= domain[1])
      .map((point) => ({ ...point, lower: point.estimate, upper: point.estimate })),
  );
  const vertical = ratioDomain(lines);
  return {
    width,
    height,
    margin,
    innerWidth,
    innerHeight,
    x: linearScale({ domain, range: [0, innerWidth] }),
    y: logScale({ domain: vertical, range: [innerHeight, 0] }),
    yTicks: ratioTicks(vertical[0], vertical[1], 7),
  };
};

/** Cuts a curve where its own store's range ends, so that what lies outside can be drawn dashed. */
export const splitByRange = <Point extends { x: number }>(
  points: readonly Point[],
  range: readonly [number, number] | null,
) => {
  if (!range) return { inside: [...points], before: [], after: [] };
  const inside = points.filter((point) => point.x >= range[0] && point.x <= range[1]);
  if (inside.length === 0) return { inside: [], before: [...points], after: [] };
  const first = points.indexOf(inside[0]);
  const last = points.indexOf(inside[inside.length - 1]);
  return { inside, before: points.slice(0, first + 1), after: points.slice(last) };
};
