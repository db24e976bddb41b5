import { GroupShape } from "./parts/group-shape";
import type { StoreGroup } from "./parts/group-shape";
import { linearScale } from "./scale/scale";

type IntervalMarkProps = {
  estimate: number;
  lower: number;
  upper: number;
  /** The same for every row of a table, so that rows can be compared. */
  domain: readonly [number, number];
  /** Null for the whole chain, in ink. */
  group: StoreGroup | null;
  /** A value worth a mark in each row, such as −1. */
  reference?: number;
  width?: number;
};

const height = 20;
const side = 8;

/** One row's estimate with its interval, to scale with the rows above and below. */
export const IntervalMark = ({ estimate, lower, upper, domain, group, reference, width = 150 }: IntervalMarkProps) => {
  const x = linearScale({ domain, range: [side, width - side] });
  const inside = (value: number) => x.toPixel(Math.min(domain[1], Math.max(domain[0], value)));
  return (
    <svg width={width} height={height} className="block" aria-hidden="true" data-group={group ?? undefined}>
      {reference !== undefined && (
        <line
          className="chart-axis"
          x1={x.toPixel(reference)}
          x2={x.toPixel(reference)}
          y1="2"
          y2={height - 2}
          strokeOpacity="0.5"
        />
      )}
      <line
        x1={inside(lower)}
        x2={inside(upper)}
        y1={height / 2}
        y2={height / 2}
        stroke={group === null ? "var(--ink)" : "var(--group)"}
        strokeWidth="3"
        strokeOpacity="0.4"
        strokeLinecap="round"
        data-part="interval"
      />
      {group === null ? (
        <rect x={inside(estimate) - 1.5} y={height / 2 - 6} width="3" height="12" fill="var(--ink)" />
      ) : (
        <GroupShape group={group} x={inside(estimate)} y={height / 2} />
      )}
    </svg>
  );
};
