import { memo } from "react";
import type { Scale } from "../scale/scale";
import { rugStrokes } from "./rug-strokes";

type RugProps = { values: readonly number[]; x: Scale; y: number };

/** One short stroke per value seen, at its exact place; where weeks share a place the stroke is taller and darker. */
export const Rug = memo(function Rug({ values, x, y }: RugProps) {
  return (
    <g stroke="var(--driver)" strokeWidth="1.25" aria-hidden="true" data-part="rug">
      {rugStrokes(values, x).map(({ place, height, opacity }) => (
        <line key={place} x1={place} x2={place} y1={y + 6 - height} y2={y + 6} strokeOpacity={opacity} />
      ))}
    </g>
  );
});
