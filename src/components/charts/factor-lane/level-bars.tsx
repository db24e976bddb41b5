import type { LaneGeometry } from "../driver-lane/lane-geometry";
import { fewestWeeks } from "../scale/unseen-ranges";
import { wrapLabel } from "../scale/place-labels";
import { isLearnt } from "./factor-level";
import type { FactorLevel } from "./factor-level";

type LevelBarsProps = {
  levels: readonly FactorLevel[];
  geometry: LaneGeometry;
  baseline: string | null;
  value: string | null;
  hatchId: string;
};

const barWidth = 48;

/** Each level's multiplier as a bar with its band; hatched where fewer than five weeks support it. */
export const LevelBars = ({ levels, geometry, baseline, value, hatchId }: LevelBarsProps) => {
  const { x, y, innerHeight } = geometry;
  const inside = (pixel: number) => Math.min(innerHeight, Math.max(0, pixel));
  return levels.map((level, index) => {
    const middle = x.toPixel(index + 0.5);
    const name = wrapLabel(level.label, x.toPixel(1) - 8).map((line, row) => (
      <text
        key={line}
        className={level.value === value ? "chart-text-strong" : "chart-text"}
        x={middle}
        y={innerHeight + 22 + row * 15}
        textAnchor="middle"
        style={{ fontSize: 12.5 }}
      >
        {line}
      </text>
    ));
    if (!isLearnt(level)) return <g key={level.value}>{name}</g>;
    const height = y.toPixel(level.estimate);
    const [top, bottom] = [inside(y.toPixel(level.upper)), inside(y.toPixel(level.lower))];
    const left = middle - barWidth / 2;
    const isThin = (level.isHardlySeen ?? level.weeks < fewestWeeks) && level.value !== baseline;
    return (
      <g key={level.value} data-level={level.value}>
        {isThin && <rect x={left - 8} y={0} width={barWidth + 16} height={innerHeight} fill={`url(#${hatchId})`} />}
        <rect
          x={left}
          y={top}
          width={barWidth}
          height={Math.max(0, bottom - top)}
          rx="2"
          fill="var(--driver)"
          fillOpacity="0.2"
          data-part="band"
        />
        <line
          x1={left}
          x2={left + barWidth}
          y1={height}
          y2={height}
          stroke="var(--driver)"
          strokeWidth="3"
          strokeLinecap="round"
          data-part="bar"
        />
        {level.value === baseline && (
          <circle
            cx={middle}
            cy={height}
            r="4.75"
            fill="var(--sheet)"
            stroke="var(--driver)"
            strokeWidth="2"
            data-part="baseline"
          />
        )}
        {level.value === value && level.value !== baseline && (
          <circle
            cx={middle}
            cy={height}
            r="5.75"
            fill="var(--driver)"
            stroke="var(--sheet)"
            strokeWidth="1.5"
            data-part="dot"
          />
        )}
        {name}
      </g>
    );
  });
};
