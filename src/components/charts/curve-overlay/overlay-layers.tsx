import { createContext, useContext } from "react";
import { formatMultiplier } from "@/lib/format/number";
import { BottomAxis, LeftAxis } from "../parts/axes";
import { bandPath, linePath } from "../parts/band-path";
import type { LabelledTick } from "../scale/month-ticks";
import { splitByRange } from "./overlay-geometry";
import type { OverlayGeometry } from "./overlay-geometry";
import type { OverlayCurve } from "./curve-overlay";

export type OverlayPicture = {
  id: string;
  geometry: OverlayGeometry;
  curves: readonly OverlayCurve[];
  chain: OverlayCurve | null;
  anchor: number | null;
  xTicks: readonly LabelledTick[];
  xLabel: string;
};

export const OverlayPictureContext = createContext<OverlayPicture | null>(null);

export const useOverlayPicture = (): OverlayPicture => {
  const picture = useContext(OverlayPictureContext);
  if (!picture) throw new Error("An overlay layer stands outside its chart.");
  return picture;
};

export const OverlayGround = () => {
  const { id, geometry, anchor, xTicks, xLabel } = useOverlayPicture();
  const { innerWidth, innerHeight, x, y, yTicks } = geometry;
  return (
    <g>
      <clipPath id={`${id}-clip`}>
        <rect width={innerWidth} height={innerHeight} />
      </clipPath>
      <LeftAxis
        scale={y}
        ticks={yTicks.map((value) => ({
          value,
          label: formatMultiplier(value, { digits: Math.min(2, (String(value).split(".")[1] ?? "").length) }),
        }))}
        left={0}
        right={innerWidth}
      />
      <line className="chart-reference" x1={0} x2={innerWidth} y1={y.toPixel(1)} y2={y.toPixel(1)} />
      {anchor !== null && (
        <line className="chart-reference" x1={x.toPixel(anchor)} x2={x.toPixel(anchor)} y1={0} y2={innerHeight} />
      )}
      <line className="chart-axis" x1={0} x2={innerWidth} y1={innerHeight} y2={innerHeight} />
      <BottomAxis scale={x} ticks={xTicks} y={innerHeight} />
      <text className="chart-text" x={innerWidth} y={innerHeight + 40} textAnchor="end">
        {xLabel}
      </text>
    </g>
  );
};

/** Every store's line in its group's colour, dashed outside what that store has seen. */
export const OverlayLines = () => {
  const { id, geometry, curves } = useOverlayPicture();
  return (
    <g clipPath={`url(#${id}-clip)`} fill="none">
      {curves.map((curve) => (
        <OverlayLine
          key={curve.id}
          curve={curve}
          geometry={geometry}
          stroke="var(--group)"
          width={1.4}
          opacity={0.55}
        />
      ))}
    </g>
  );
};

type OverlayLineProps = {
  curve: OverlayCurve;
  geometry: OverlayGeometry;
  stroke: string;
  width: number;
  opacity?: number;
};

export const OverlayLine = ({ curve, geometry, stroke, width, opacity = 1 }: OverlayLineProps) => {
  const { inside, before, after } = splitByRange(curve.points, curve.range);
  return (
    <g
      data-group={curve.group}
      data-curve={curve.id}
      stroke={stroke}
      strokeWidth={width}
      strokeOpacity={opacity}
      strokeLinejoin="round"
    >
      <path d={linePath(inside, geometry)} />
      {[before, after].map(
        (part, index) =>
          part.length > 1 && (
            <path key={index} d={linePath(part, geometry)} strokeDasharray="3 4" strokeOpacity={opacity * 0.6} />
          ),
      )}
    </g>
  );
};

export const ChainLine = () => {
  const { id, geometry, chain } = useOverlayPicture();
  if (!chain) return null;
  return (
    <g clipPath={`url(#${id}-clip)`} fill="none">
      <OverlayLine curve={chain} geometry={geometry} stroke="var(--ink)" width={2.5} />
    </g>
  );
};

export const bandOf = (curve: OverlayCurve, geometry: OverlayGeometry) =>
  bandPath(splitByRange(curve.points, curve.range).inside, geometry);
