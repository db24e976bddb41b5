import type { CurvePoint } from "@/components/charts/scale/curve-height";

export type Swing = { ratio: number; highestAt: number };

/** How much a curve moves demand within what was seen: its highest over its lowest point, and where the highest lies. */
export const swingOf = (points: readonly CurvePoint[], range: readonly [number, number] | null): Swing | null => {
  const within = points.filter(({ x }) => range === null || (x >= range[0] && x <= range[1]));
  if (within.length === 0) return null;
  const highest = within.reduce((best, point) => (point.estimate > best.estimate ? point : best));
  const lowest = within.reduce((best, point) => (point.estimate < best.estimate ? point : best));
  return { ratio: highest.estimate / lowest.estimate, highestAt: highest.x };
};
