import { useMemo } from "react";
import type { ReactNode } from "react";
import { useElementWidth } from "@/lib/use-element-width";
import type { DriverColour } from "../drivers";
import type { CurvePoint } from "../scale/curve-height";
import type { LabelledTick } from "../scale/month-ticks";
import { roundTicks } from "../scale/round-ticks";
import type { Steps } from "../scale/snap";
import { DriverCurve } from "./driver-curve";
import { LaneEffect } from "./lane-effect";
import type { LaneEffectText } from "./lane-effect";
import { laneGeometry, laneHeight } from "./lane-geometry";
import { LaneLayout } from "./lane-layout";
import { LaneOverlay } from "./lane-overlay";
import { LaneValue } from "./lane-value";

export type DriverLaneProps = {
  driver: DriverColour;
  /** "Price" */
  label: string;
  /** The label on the page, when it carries a `Term`. */
  name?: ReactNode;
  /** What the lane shows: "Demand by price, relative to the base". */
  title: string;
  /** Multipliers of demand, at rising x over the whole axis. */
  points: readonly CurvePoint[];
  seen: readonly number[];
  unseen: readonly (readonly [number, number])[];
  steps: Steps;
  value: number;
  baseline: number | null;
  mixed?: readonly [number, number];
  onChange: (value: number) => void;
  onCommit?: (value: number) => void;
  readOnly?: boolean;
  format: (value: number) => string;
  /** Lets the value be typed. */
  parse?: (text: string) => number | null;
  /** What can be typed, where that is more than a number. */
  hint?: string;
  /** On the axis; by default as `format`. */
  formatTick?: (value: number) => string;
  /** By default at round values; a year's axis gives months. */
  ticks?: readonly LabelledTick[];
  detail?: ReactNode;
  effect?: LaneEffectText;
  yDomain?: readonly [number, number];
};

/** A driver as a slider on its own curve: the track is the curve's horizontal axis, the dot rides the curve. */
export const DriverLane = (props: DriverLaneProps) => {
  const {
    label,
    title,
    points,
    seen,
    unseen,
    steps,
    value,
    baseline,
    mixed,
    format,
    formatTick = format,
    ticks,
  } = props;
  const [plot, width] = useElementWidth<HTMLDivElement>(600);
  const { min, max } = steps;
  const { yDomain } = props;
  const geometry = useMemo(
    () => laneGeometry({ width, domain: [min, max], points, yDomain }),
    [width, min, max, points, yDomain],
  );
  const tickCount = Math.max(3, Math.min(7, Math.round(geometry.innerWidth / 90)));
  const xTicks = useMemo(
    () => ticks ?? roundTicks(min, max, tickCount).map((tick) => ({ value: tick, label: formatTick(tick) })),
    // A new function that writes the same labels must not redraw the curve while someone drags.
    // eslint-disable-next-line react-hooks/exhaustive-deps
    [ticks, min, max, tickCount],
  );
  const commit = (next: number) => {
    props.onChange(next);
    props.onCommit?.(next);
  };
  const table = () => ({
    columns: [label, "Times base", "Lower", "Upper"],
    rows: points.map((point) => [point.x, point.estimate, point.lower, point.upper]),
    formats: [format, ...Array<(n: number) => string>(3).fill((n) => n.toFixed(3))],
  });
  return (
    <LaneLayout
      driver={props.driver}
      name={props.name ?? label}
      title={title}
      detail={props.detail}
      height={laneHeight}
      table={table}
      effect={props.effect && <LaneEffect {...props.effect} />}
      value={
        <LaneValue
          label={`${label}, typed`}
          value={value}
          text={format(value)}
          isMixed={mixed !== undefined}
          steps={steps}
          parse={props.readOnly ? undefined : props.parse}
          format={format}
          hint={props.hint}
          onCommit={commit}
        />
      }
    >
      <div ref={plot} style={{ height: laneHeight }} className="overflow-hidden">
        <DriverCurve label={title} geometry={geometry} points={points} seen={seen} unseen={unseen} xTicks={xTicks} />
        <LaneOverlay
          label={label}
          geometry={geometry}
          points={points}
          value={value}
          baseline={baseline}
          mixed={mixed}
          steps={steps}
          valueText={format(value)}
          readOnly={props.readOnly}
          onChange={props.onChange}
          onCommit={props.onCommit}
        />
      </div>
    </LaneLayout>
  );
};
