import type { StoreGroup } from "./parts/group-shape";
import { GroupMark } from "./parts/group-shape";
import { linePath } from "./parts/band-path";
import { linearScale, logScale } from "./scale/scale";

const buttonStyle =
  "rounded-sm border border-transparent p-1.5 text-left transition-colors hover:bg-hover " +
  "aria-pressed:border-control aria-pressed:bg-hover";

type Point = { x: number; estimate: number };

type SmallMultipleProps = {
  name: string;
  group: StoreGroup;
  points: readonly Point[];
  /** Drawn behind in grey, to compare with. */
  chain: readonly Point[];
  /** The same for all, so that slopes can be compared. */
  xDomain: readonly [number, number];
  yDomain: readonly [number, number];
  isSelected: boolean;
  onSelect: () => void;
};

const width = 96;
const height = 44;

/** One store's curve, small, over the chain's; pressing it chooses the store. */
export const SmallMultiple = (props: SmallMultipleProps) => {
  const x = linearScale({ domain: props.xDomain, range: [2, width - 2] });
  const y = logScale({ domain: props.yDomain, range: [height - 2, 2] });
  return (
    <button
      type="button"
      data-group={props.group}
      aria-pressed={props.isSelected}
      onClick={props.onSelect}
      className={buttonStyle}
    >
      <svg
        viewBox={`0 0 ${width} ${height}`}
        className="block h-11 w-full"
        preserveAspectRatio="none"
        fill="none"
        aria-hidden="true"
      >
        <line
          className="chart-grid"
          x1="0"
          x2={width}
          y1={y.toPixel(1)}
          y2={y.toPixel(1)}
          vectorEffect="non-scaling-stroke"
        />
        <path
          d={linePath(props.chain, { x, y })}
          stroke="var(--base-bar)"
          strokeWidth="1.25"
          vectorEffect="non-scaling-stroke"
        />
        <path
          d={linePath(props.points, { x, y })}
          stroke="var(--group)"
          strokeWidth="2"
          vectorEffect="non-scaling-stroke"
        />
      </svg>
      <span className="mt-1 flex items-center gap-1.5 text-sm">
        <GroupMark group={props.group} />
        <span className="truncate">{props.name}</span>
      </span>
    </button>
  );
};
