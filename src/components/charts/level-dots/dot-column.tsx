import { GroupShape } from "../parts/group-shape";
import type { Scale } from "../scale/scale";
import type { PlacedColumn } from "./dot-layout";

type DotColumnProps = {
  column: PlacedColumn;
  y: Scale;
  foot: number;
  highlighted: string | null;
  onHighlight: (id: string) => void;
};

export const DotColumn = ({ column, y, foot, highlighted, onHighlight }: DotColumnProps) => {
  const inside = (value: number) => y.toPixel(Math.min(y.domain[1], Math.max(y.domain[0], value)));
  const named = column.dots.find((dot) => dot.id === highlighted);
  return (
    <g>
      {column.chain !== null && (
        <line
          x1={column.left}
          x2={column.right}
          y1={y.toPixel(column.chain)}
          y2={y.toPixel(column.chain)}
          stroke="var(--ink)"
          strokeWidth="2"
          data-part="chain"
        />
      )}
      {column.dots.map((dot) => (
        <g
          key={dot.id}
          data-group={dot.group}
          data-dot={dot.id}
          className="cursor-pointer"
          onClick={() => onHighlight(dot.id)}
        >
          <line
            x1={dot.x}
            x2={dot.x}
            y1={inside(dot.lower)}
            y2={inside(dot.upper)}
            stroke="var(--group)"
            strokeWidth={dot.id === highlighted ? 4 : 2.5}
            strokeOpacity={dot.id === highlighted ? 0.55 : 0.3}
            strokeLinecap="round"
          />
          <GroupShape group={dot.group} x={dot.x} y={y.toPixel(dot.estimate)} />
        </g>
      ))}
      {named && (
        <text className="chart-text-strong chart-halo" x={named.x} y={inside(named.upper) - 8} textAnchor="middle">
          {named.name}
        </text>
      )}
      <text
        className="chart-text"
        x={(column.left + column.right) / 2}
        y={foot}
        textAnchor="middle"
        style={{ fontSize: 12.5 }}
      >
        {column.label}
      </text>
    </g>
  );
};
