import type { Scale } from "../scale/scale";

/** The pattern that marks what was not seen, wherever it stands. One per drawing, under an id of its own. */
export const HatchPattern = ({ id }: { id: string }) => (
  <pattern id={id} width="7" height="7" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
    <line className="chart-hatch-line" x1="0" y1="0" x2="0" y2="7" />
  </pattern>
);

type HatchingProps = {
  id: string;
  ranges: readonly (readonly [number, number])[];
  x: Scale;
  top: number;
  bottom: number;
};

/** Stretches of the axis that too few weeks support, hatched within the chart's own range. */
export const Hatching = ({ id, ranges, x, top, bottom }: HatchingProps) => {
  const [start, end] = x.range;
  return (
    <g aria-hidden="true">
      {ranges.map(([from, to]) => {
        const left = Math.max(start, x.toPixel(from));
        const right = Math.min(end, x.toPixel(to));
        if (right - left < 1) return null;
        return <rect key={from} x={left} y={top} width={right - left} height={bottom - top} fill={`url(#${id})`} />;
      })}
    </g>
  );
};
