import { ratioDomain } from "../scale/ratio-domain";
import { ratioTicks } from "../scale/ratio-ticks";
import type { CurvePoint } from "../scale/curve-height";
import { linearScale, logScale } from "../scale/scale";
import type { Scale } from "../scale/scale";

/** Where things stand in a lane's drawing, in pixels from its upper left. */
export type LaneGeometry = {
  width: number;
  height: number;
  margin: { top: number; right: number; bottom: number; left: number };
  /** Both map to pixels inside the margins, as nivo's own scales do. */
  x: Scale;
  y: Scale;
  yTicks: number[];
  innerWidth: number;
  innerHeight: number;
  /** Below the curve, inside the margin: the weeks seen, then the track. */
  rugY: number;
  trackY: number;
};

export const laneHeight = 156;
const margin = { top: 12, right: 20, bottom: 52, left: 52 };
const rugGap = 8;
const trackGap = 20;

type LaneGeometryOptions = {
  width: number;
  domain: readonly [number, number];
  points: readonly CurvePoint[];
  height?: number;
  yDomain?: readonly [number, number];
};

/** One set of scales for everything a lane draws: curve, band, rug, hatching, track, handle and dots. */
export const laneGeometry = ({
  width,
  domain,
  points,
  height = laneHeight,
  yDomain,
}: LaneGeometryOptions): LaneGeometry => {
  const innerWidth = Math.max(40, width - margin.left - margin.right);
  const innerHeight = height - margin.top - margin.bottom;
  const vertical = yDomain ?? ratioDomain(points);
  return {
    width: innerWidth + margin.left + margin.right,
    height,
    margin,
    innerWidth,
    innerHeight,
    x: linearScale({ domain, range: [0, innerWidth] }),
    y: logScale({ domain: vertical, range: [innerHeight, 0] }),
    yTicks: ratioTicks(vertical[0], vertical[1], 4),
    rugY: innerHeight + rugGap,
    trackY: innerHeight + trackGap,
  };
};
