import type { Curve } from "@shared/contract/drivers";
import { roundStep } from "@/components/charts/scale/round-ticks";
import { useChainFormat } from "@/lib/format/chain-format";
import { parseNumber } from "@/lib/format/parse-number";
import { driverLabel } from "../view/driver-words";
import { NumberLane } from "./number-lane";

/** Any other number that a model may hold. */
export const PlainLane = ({ curve, level }: { curve: Curve & { x: number[] }; level: number }) => {
  const format = useChainFormat();
  const [low, high] = [curve.x[0], curve.x[curve.x.length - 1]];
  const step = roundStep(low, high, 100);
  const digits = Math.max(0, Math.min(4, -Math.floor(Math.log10(step))));
  const label = driverLabel(curve.driver);
  return (
    <NumberLane
      curve={curve}
      level={level}
      label={label}
      title={`Demand by ${label}, in times an average week`}
      steps={{ min: low, max: high, step }}
      start={(low + high) / 2}
      baseline={null}
      format={(value) => format.number(value, { digits })}
      parse={parseNumber}
      detail={() => null}
    />
  );
};
