import { ratioDomain } from "../scale/ratio-domain";
import { logScale } from "../scale/scale";
import type { Scale } from "../scale/scale";
import type { DotLevel, LevelDot } from "./level-dots";

export type PlacedDot = LevelDot & { x: number };
export type PlacedColumn = {
  value: string;
  label: string;
  left: number;
  right: number;
  dots: PlacedDot[];
  chain: number | null;
};
export type DotLayout = { y: Scale; columns: PlacedColumn[]; margin: typeof margin };

const margin = { top: 12, right: 8, bottom: 34, left: 52 };
const gap = 28;

/** Columns side by side; in each the dots stand in the order of their estimates, evenly. */
export const dotLayout = ({
  levels,
  width,
  height,
}: {
  levels: readonly DotLevel[];
  width: number;
  height: number;
}): DotLayout => {
  const whole = width - margin.left - margin.right;
  const place = whole / Math.max(1, levels.length);
  return {
    margin,
    y: logScale({
      domain: ratioDomain(levels.flatMap((level) => level.dots)),
      range: [height - margin.bottom, margin.top],
    }),
    columns: levels.map((level, index) => {
      const left = margin.left + place * index + gap / 2;
      const right = margin.left + place * (index + 1) - gap / 2;
      const ordered = [...level.dots].sort((a, b) => a.estimate - b.estimate);
      const step = (right - left) / Math.max(1, ordered.length);
      return { ...level, left, right, dots: ordered.map((dot, at) => ({ ...dot, x: left + step * (at + 0.5) })) };
    }),
  };
};
