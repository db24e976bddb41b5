import { useMemo, useState } from "react";
import type { Curve } from "@shared/contract/drivers";
import { FactorLane } from "@/components/charts/factor-lane/factor-lane";
import { useChainFormat } from "@/lib/format/chain-format";
import { countOf, formatRange } from "@/lib/format/number";
import { formatPercent } from "@/lib/format/percent";
import { factorLevels, levelLabel, referenceLevel } from "../view/curve-points";
import { driverColour, driverLabel } from "../view/driver-words";

type LevelLaneProps = { curve: Curve & { x: string[] }; level: number };

/** A driver of a few levels, each against weeks without it. */
export const LevelLane = ({ curve, level }: LevelLaneProps) => {
  const format = useChainFormat();
  const levels = useMemo(() => factorLevels(curve), [curve]);
  const reference = referenceLevel(curve);
  const [picked, setPicked] = useState<string | null>(null);
  const chosen =
    levels.find((one) => one.value === picked) ?? levels.find((one) => one.value !== reference) ?? levels[0];
  const label = driverLabel(curve.driver);
  const isReference = chosen.value === reference;
  return (
    <FactorLane
      driver={driverColour(curve.driver)}
      label={label}
      title={`Demand by ${label.toLowerCase()}, in times a week at the level ${levelLabel(reference).toLowerCase()}`}
      levels={levels}
      value={chosen.value}
      baseline={reference}
      onChange={setPicked}
      detail={`seen in ${countOf(chosen.weeks, "week")}`}
      effect={
        isReference
          ? { multiplier: "as it is", note: "the others are read against it" }
          : {
              multiplier: format.percent((chosen.estimate ?? 1) - 1, { signed: true }),
              interval: formatRange(format.multiplier(chosen.lower), format.number(chosen.upper, { digits: 2 })),
              note: `${formatPercent(level)} band`,
            }
      }
    />
  );
};
