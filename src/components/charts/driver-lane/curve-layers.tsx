import { createContext, useContext } from "react";
import { formatMultiplier } from "@/lib/format/number";
import { BottomAxis, LeftAxis } from "../parts/axes";
import { bandPath } from "../parts/band-path";
import { HatchPattern, Hatching } from "../parts/hatching";
import { Rug } from "../parts/rug";
import type { CurvePoint } from "../scale/curve-height";
import type { LabelledTick } from "../scale/month-ticks";
import type { LaneGeometry } from "./lane-geometry";

export type CurvePicture = {
  id: string;
  geometry: LaneGeometry;
  points: readonly CurvePoint[];
  seen: readonly number[];
  unseen: readonly (readonly [number, number])[];
  xTicks: readonly LabelledTick[];
};

/** nivo calls layers with its own properties only; what a lane draws reaches them this way. */
export const CurvePictureContext = createContext<CurvePicture | null>(null);

const usePicture = (): CurvePicture => {
  const picture = useContext(CurvePictureContext);
  if (!picture) throw new Error("A curve layer stands outside its curve.");
  return picture;
};

export const GroundLayer = () => {
  const { id, geometry, unseen } = usePicture();
  const { innerWidth, innerHeight, x, y, yTicks } = geometry;
  const ticks = yTicks.map((value) => ({ value, label: formatMultiplier(value, { digits: decimals(yTicks) }) }));
  return (
    <g>
      <defs>
        <HatchPattern id={`${id}-hatch`} />
        <clipPath id={`${id}-clip`}>
          <rect width={innerWidth} height={innerHeight} />
        </clipPath>
      </defs>
      <Hatching id={`${id}-hatch`} ranges={unseen} x={x} top={0} bottom={innerHeight} />
      <LeftAxis scale={y} ticks={ticks} left={0} right={innerWidth} />
      <line className="chart-reference" x1={0} x2={innerWidth} y1={y.toPixel(1)} y2={y.toPixel(1)} />
    </g>
  );
};

/** Enough decimals for the finest tick: × 0.95, but × 2. */
const decimals = (ticks: readonly number[]) =>
  Math.min(2, Math.max(0, ...ticks.map((tick) => (String(Number(tick.toPrecision(3))).split(".")[1] ?? "").length)));

export const BandLayer = () => {
  const { id, geometry, points } = usePicture();
  return (
    <path
      d={bandPath(points, geometry)}
      clipPath={`url(#${id}-clip)`}
      fill="var(--driver)"
      fillOpacity="0.16"
      aria-hidden="true"
    />
  );
};

export const FootLayer = () => {
  const { geometry, seen, xTicks } = usePicture();
  const { innerWidth, rugY, trackY, x } = geometry;
  return (
    <g>
      <Rug values={seen} x={x} y={rugY} />
      <line
        x1={0}
        x2={innerWidth}
        y1={trackY}
        y2={trackY}
        stroke="var(--track)"
        strokeWidth="1.5"
        strokeLinecap="round"
      />
      <BottomAxis scale={x} ticks={xTicks} y={trackY + 1} />
    </g>
  );
};
