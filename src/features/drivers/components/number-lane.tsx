import { useMemo, useState } from "react";
import type { ReactNode } from "react";
import type { Curve } from "@shared/contract/drivers";
import { DriverLane } from "@/components/charts/driver-lane/driver-lane";
import type { LabelledTick } from "@/components/charts/scale/month-ticks";
import { curveValueAt } from "@/components/charts/scale/curve-height";
import type { Steps } from "@/components/charts/scale/snap";
import { unseenRanges } from "@/components/charts/scale/unseen-ranges";
import { useChainFormat } from "@/lib/format/chain-format";
import { formatPercent } from "@/lib/format/percent";
import { formatRange } from "@/lib/format/number";
import { curvePoints } from "../view/curve-points";
import { driverColour } from "../view/driver-words";

type NumberLaneProps = {
  curve: Curve & { x: number[] };
  level: number;
  label: string;
  name?: ReactNode;
  title: string;
  steps: Steps;
  /** Where the handle begins. */
  start: number;
  /** The hollow dot. */
  baseline: number | null;
  format: (value: number) => string;
  parse?: (text: string) => number | null;
  formatTick?: (value: number) => string;
  ticks?: readonly LabelledTick[];
  detail: (value: number) => ReactNode;
};

/** A driver's curve in one store, to walk along: what a value does, and how sure that is. */
export const NumberLane = (props: NumberLaneProps) => {
  const { curve, level, label, name, title, steps, baseline, format, parse, formatTick, ticks, detail } = props;
  const chain = useChainFormat();
  const [moved, setMoved] = useState<number | null>(null);
  const points = useMemo(() => curvePoints(curve), [curve]);
  const unseen = useMemo(() => unseenRanges(curve.x, curve.supportCount), [curve]);
  const value = Math.min(steps.max, Math.max(steps.min, moved ?? props.start));
  const here = curveValueAt(points, value);
  return (
    <DriverLane
      driver={driverColour(curve.driver)}
      label={label}
      name={name}
      title={title}
      points={points}
      seen={curve.seen}
      unseen={unseen}
      steps={steps}
      value={value}
      baseline={baseline}
      onChange={setMoved}
      format={format}
      parse={parse}
      formatTick={formatTick}
      ticks={ticks}
      detail={detail(value)}
      effect={{
        multiplier: chain.multiplier(here.estimate),
        interval: formatRange(chain.number(here.lower, { digits: 2 }), chain.number(here.upper, { digits: 2 })),
        note: (
          <>
            {formatPercent(level)} band
            <br />
            of an average week
          </>
        ),
      }}
    />
  );
};
