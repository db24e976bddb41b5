import type { Scale } from "../scale/scale";

export type RugStroke = { place: number; count: number; height: number; opacity: number };

const lowest = 4;
const tallest = 10;

/** Weeks by their place to a quarter of a pixel: ten weeks at one price stand out from one week at another. */
export const rugStrokes = (values: readonly number[], x: Scale): RugStroke[] => {
  const counts = new Map<number, number>();
  for (const value of values) {
    const place = Math.round(x.toPixel(value) * 4) / 4;
    counts.set(place, (counts.get(place) ?? 0) + 1);
  }
  return [...counts].map(([place, count]) => ({
    place,
    count,
    height: Math.min(tallest, lowest + 1.6 * Math.log2(count)),
    opacity: Math.min(0.95, 0.5 + 0.12 * Math.log2(count)),
  }));
};
