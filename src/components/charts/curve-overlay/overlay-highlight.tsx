import { curveValueAt } from "../scale/curve-height";
import { bandOf, OverlayLine } from "./overlay-layers";
import type { OverlayGeometry } from "./overlay-geometry";
import type { OverlayCurve } from "./curve-overlay";

type OverlayHighlightProps = {
  id: string;
  geometry: OverlayGeometry;
  highlighted: OverlayCurve | null;
  hovered: OverlayCurve | null;
  chain: OverlayCurve | null;
};

/** What answers the pointer, in a drawing above the still one: the chosen store with its band, names at the lines. */
export const OverlayHighlight = ({ id, geometry, highlighted, hovered, chain }: OverlayHighlightProps) => {
  const { width, height, margin, innerWidth, innerHeight } = geometry;
  return (
    <svg width={width} height={height} className="pointer-events-none absolute inset-0" aria-hidden="true">
      <clipPath id={`${id}-highlight`}>
        <rect width={innerWidth} height={innerHeight} />
      </clipPath>
      <g transform={`translate(${margin.left} ${margin.top})`}>
        <g clipPath={`url(#${id}-highlight)`} fill="none">
          {highlighted && (
            <g data-group={highlighted.group}>
              <path d={bandOf(highlighted, geometry)} fill="var(--group)" fillOpacity="0.16" />
              <OverlayLine curve={highlighted} geometry={geometry} stroke="var(--group)" width={3} />
            </g>
          )}
          {hovered && hovered !== highlighted && (
            <OverlayLine curve={hovered} geometry={geometry} stroke="var(--group)" width={2.5} />
          )}
        </g>
        {highlighted && <NameOnLine curve={highlighted} geometry={geometry} at={0.03} />}
        {hovered && hovered !== highlighted && <NameOnLine curve={hovered} geometry={geometry} at={0.2} />}
        {chain && <NameOnLine curve={chain} geometry={geometry} at={0.97} anchor="end" />}
      </g>
    </svg>
  );
};

type NameOnLineProps = { curve: OverlayCurve; geometry: OverlayGeometry; at: number; anchor?: "start" | "end" };

const NameOnLine = ({ curve, geometry, at, anchor = "start" }: NameOnLineProps) => {
  const { x, y, innerWidth } = geometry;
  const pixel = innerWidth * at;
  const height = y.toPixel(curveValueAt(curve.points, x.toValue(pixel)).estimate);
  return (
    <text className="chart-text-strong chart-halo" x={pixel} y={height + 17} textAnchor={anchor} data-part="name">
      {curve.name}
    </text>
  );
};
