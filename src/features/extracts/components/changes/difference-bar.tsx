type DifferenceBarProps = {
  difference: number;
  /** The largest difference in the table, either way. */
  most: number;
};

const width = 72;
const height = 12;

/** How a week's units change: to the right what comes in, to the left what goes. */
export const DifferenceBar = ({ difference, most }: DifferenceBarProps) => {
  const half = width / 2;
  const length = most === 0 ? 0 : Math.max(difference === 0 ? 0 : 1, (Math.abs(difference) / most) * (half - 1));
  return (
    <svg width={width} height={height} aria-hidden="true" className="inline-block shrink-0 align-middle">
      <line className="chart-axis" x1={half} x2={half} y1={0} y2={height} />
      <rect
        className={difference < 0 ? "fill-danger" : "fill-(--plan-bar)"}
        x={difference < 0 ? half - length : half}
        y={3}
        width={length}
        height={height - 6}
      />
    </svg>
  );
};
