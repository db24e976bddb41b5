import { Line } from "@nivo/line";
import { memo, useId, useMemo } from "react";
import type { CurvePoint } from "../scale/curve-height";
import type { LabelledTick } from "../scale/month-ticks";
import { BandLayer, CurvePictureContext, FootLayer, GroundLayer } from "./curve-layers";
import type { LaneGeometry } from "./lane-geometry";

export type DriverCurveProps = {
  label: string;
  geometry: LaneGeometry;
  points: readonly CurvePoint[];
  /** Values of the weeks it was learnt from. */
  seen: readonly number[];
  /** Stretches that too few weeks support. */
  unseen: readonly (readonly [number, number])[];
  xTicks: readonly LabelledTick[];
};

const layers = [GroundLayer, BandLayer, "lines" as const, FootLayer];
const theme = { background: "transparent" };

/**
 * A driver's curve with its band, the weeks seen and both axes. Drawn once for given data: whatever moves while
 * dragging lies in a drawing above it.
 */
export const DriverCurve = memo(function DriverCurve(props: DriverCurveProps) {
  const { label, geometry, points, seen, unseen, xTicks } = props;
  const id = useId().replace(/[^\w-]/g, "");
  const data = useMemo(
    () => [{ id: "curve", data: points.map((point) => ({ x: point.x, y: point.estimate })) }],
    [points],
  );
  const picture = useMemo(
    () => ({ id, geometry, points, seen, unseen, xTicks }),
    [id, geometry, points, seen, unseen, xTicks],
  );
  const { width, height, margin, x, y } = geometry;
  return (
    <CurvePictureContext.Provider value={picture}>
      <Line
        data={data}
        width={width}
        height={height}
        margin={margin}
        xScale={{ type: "linear", min: x.domain[0], max: x.domain[1], nice: false }}
        yScale={{ type: "log", base: 10, min: y.domain[0], max: y.domain[1], nice: false }}
        layers={layers}
        colors={["var(--driver)"]}
        lineWidth={2.25}
        curve="linear"
        theme={theme}
        isInteractive={false}
        animate={false}
        role="img"
        ariaLabel={label}
      />
    </CurvePictureContext.Provider>
  );
});
