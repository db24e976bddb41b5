import { useId, useMemo } from "react";
import type { ReactNode } from "react";
import { useElementWidth } from "@/lib/use-element-width";
import { formatMultiplier } from "@/lib/format/number";
import { LaneEffect } from "../driver-lane/lane-effect";
import type { LaneEffectText } from "../driver-lane/lane-effect";
import { laneGeometry, laneHeight } from "../driver-lane/lane-geometry";
import { LaneLayout } from "../driver-lane/lane-layout";
import type { DriverColour } from "../drivers";
import { LeftAxis } from "../parts/axes";
import { HatchPattern } from "../parts/hatching";
import { isLearnt } from "./factor-level";
import type { FactorLevel } from "./factor-level";
import { LevelBars } from "./level-bars";
import { LevelChoices } from "./level-choices";

export type FactorLaneProps = {
  driver: DriverColour;
  label: string;
  name?: ReactNode;
  title: string;
  levels: readonly FactorLevel[];
  /** Null where the plan's store-weeks differ. */
  value: string | null;
  baseline: string | null;
  onChange: (value: string) => void;
  readOnly?: boolean;
  detail?: ReactNode;
  effect?: LaneEffectText;
};

/** A driver with a few levels: each with its bar and band, one of them chosen. */
export const FactorLane = (props: FactorLaneProps) => {
  const { label, title, levels, value, baseline, onChange, readOnly } = props;
  const [plot, width] = useElementWidth<HTMLDivElement>(600);
  const id = useId().replace(/[^\w-]/g, "");
  const geometry = useMemo(
    () =>
      laneGeometry({
        width,
        domain: [0, levels.length],
        points: levels.filter(isLearnt).map((level, index) => ({ ...level, x: index })),
      }),
    [width, levels],
  );
  const { margin, innerWidth, y, yTicks } = geometry;
  const chosen = levels.find((level) => level.value === value);
  const table = () => ({
    columns: [label, "Times base", "Lower", "Upper", "Weeks seen"],
    rows: levels.map((level) => [level.label, level.estimate, level.lower, level.upper, level.weeks]),
    formats: [undefined, ...Array<(n: number) => string>(3).fill((n) => n.toFixed(3))],
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
      value={<p className="text-xl font-semibold tracking-[-0.01em]">{chosen?.label ?? "mixed"}</p>}
    >
      <div ref={plot} style={{ height: laneHeight }} className="relative overflow-hidden">
        <LevelChoices
          label={label}
          levels={levels}
          value={value}
          geometry={geometry}
          onChange={onChange}
          readOnly={readOnly}
        />
        <svg
          width={geometry.width}
          height={laneHeight}
          className="pointer-events-none absolute inset-0"
          aria-hidden="true"
        >
          <defs>
            <HatchPattern id={`${id}-hatch`} />
          </defs>
          <g transform={`translate(${margin.left} ${margin.top})`}>
            <LeftAxis
              scale={y}
              ticks={yTicks.map((tick) => ({
                value: tick,
                label: formatMultiplier(tick, { digits: tick % 1 === 0 ? 0 : 1 }),
              }))}
              left={0}
              right={innerWidth}
            />
            <line className="chart-reference" x1={0} x2={innerWidth} y1={y.toPixel(1)} y2={y.toPixel(1)} />
            <LevelBars levels={levels} geometry={geometry} baseline={baseline} hatchId={`${id}-hatch`} value={value} />
          </g>
        </svg>
      </div>
    </LaneLayout>
  );
};
