import { Line } from "@nivo/line";
import { memo, useId, useMemo, useState } from "react";
import type { MouseEvent, ReactNode } from "react";
import { useElementWidth } from "@/lib/use-element-width";
import { ChartFrame } from "../frame/chart-frame";
import type { StoreGroup } from "../parts/group-shape";
import type { CurvePoint } from "../scale/curve-height";
import type { LabelledTick } from "../scale/month-ticks";
import { nearestCurve } from "../scale/nearest-curve";
import { roundTicks } from "../scale/round-ticks";
import { overlayGeometry } from "./overlay-geometry";
import { OverlayHighlight } from "./overlay-highlight";
import { ChainLine, OverlayGround, OverlayLines, OverlayPictureContext } from "./overlay-layers";
import type { OverlayPicture } from "./overlay-layers";

export type OverlayCurve = {
  id: string;
  name: string;
  group?: StoreGroup;
  /** Multipliers of demand relative to the anchor, at rising x. */
  points: readonly CurvePoint[];
  /** What this store has seen; outside it the line is dashed. Null where that is not known. */
  range: readonly [number, number] | null;
};

export type CurveOverlayProps = {
  title: string;
  heading?: ReactNode;
  xLabel: string;
  curves: readonly OverlayCurve[];
  chain: OverlayCurve | null;
  domain: readonly [number, number];
  /** Where every curve is one. */
  anchor: number | null;
  format: (x: number) => string;
  ticks?: readonly LabelledTick[];
  highlighted: string | null;
  onHighlight: (id: string) => void;
  legend?: ReactNode;
  height?: number;
};

/** One driver's curve of many stores on one picture: groups by colour, the chain in ink, one store with its band. */
export const CurveOverlay = (props: CurveOverlayProps) => {
  const {
    title,
    heading,
    xLabel,
    curves,
    chain,
    domain,
    anchor,
    format,
    ticks,
    highlighted,
    onHighlight,
    legend,
    height = 420,
  } = props;
  const [plot, width] = useElementWidth<HTMLDivElement>(720);
  const [hovered, setHovered] = useState<string | null>(null);
  const id = useId().replace(/[^\w-]/g, "");
  const [low, high] = domain;
  const geometry = useMemo(
    () =>
      overlayGeometry({
        width,
        height,
        domain: [low, high],
        curves: [...curves, ...(chain ? [chain] : [])].map((curve) => curve.points),
      }),
    [width, height, low, high, curves, chain],
  );
  const xTicks = useMemo(
    () =>
      ticks ??
      roundTicks(low, high, Math.max(4, Math.round(geometry.innerWidth / 100))).map((value) => ({
        value,
        label: format(value),
      })),
    [ticks, low, high, geometry.innerWidth, format],
  );
  const picture = useMemo(
    () => ({ id, geometry, curves, chain, anchor, xTicks, xLabel }),
    [id, geometry, curves, chain, anchor, xTicks, xLabel],
  );
  const curveUnder = (event: MouseEvent<HTMLElement>) => {
    const box = event.currentTarget.getBoundingClientRect();
    const place = {
      x: event.clientX - box.left - geometry.margin.left,
      y: event.clientY - box.top - geometry.margin.top,
    };
    return nearestCurve(curves, place, geometry) ?? null;
  };
  const find = (name: string | null) => curves.find((curve) => curve.id === name) ?? null;
  const table = () => ({
    columns: [xLabel, ...(chain ? [chain.name] : []), ...curves.map((curve) => curve.name)],
    rows:
      (chain ?? curves[0])?.points.map((point, index) => [
        point.x,
        ...(chain ? [point.estimate] : []),
        ...curves.map((curve) => curve.points[index]?.estimate ?? null),
      ]) ?? [],
    formats: [format, ...Array<(n: number) => string>(curves.length + 1).fill((n) => n.toFixed(3))],
  });
  return (
    <ChartFrame title={title} heading={heading} table={table} height={height} legend={legend}>
      <div
        ref={plot}
        className="relative cursor-pointer overflow-hidden"
        style={{ height }}
        onPointerMove={(event) => setHovered(curveUnder(event))}
        onPointerLeave={() => setHovered(null)}
        onClick={(event) => {
          const chosen = curveUnder(event);
          if (chosen) onHighlight(chosen);
        }}
      >
        <StillCurves label={title} picture={picture} />
        <OverlayHighlight
          id={id}
          geometry={geometry}
          highlighted={find(highlighted)}
          hovered={find(hovered)}
          chain={chain}
        />
      </div>
    </ChartFrame>
  );
};

const layers = [OverlayGround, OverlayLines, ChainLine];

/** Redrawn only for new curves, never for a moving pointer. */
const StillCurves = memo(function StillCurves({ label, picture }: { label: string; picture: OverlayPicture }) {
  const { geometry, curves } = picture;
  const data = useMemo(
    () =>
      curves.map((curve) => ({ id: curve.id, data: curve.points.map((point) => ({ x: point.x, y: point.estimate })) })),
    [curves],
  );
  return (
    <OverlayPictureContext.Provider value={picture}>
      <Line
        data={data}
        width={geometry.width}
        height={geometry.height}
        margin={geometry.margin}
        xScale={{ type: "linear", min: geometry.x.domain[0], max: geometry.x.domain[1], nice: false }}
        yScale={{ type: "log", base: 10, min: geometry.y.domain[0], max: geometry.y.domain[1], nice: false }}
        layers={layers}
        isInteractive={false}
        animate={false}
        role="img"
        ariaLabel={label}
      />
    </OverlayPictureContext.Provider>
  );
});
