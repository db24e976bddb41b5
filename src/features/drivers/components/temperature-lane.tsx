import type { Curve } from "@shared/contract/drivers";
import { useChain } from "@/lib/chain";
import { useChainFormat } from "@/lib/format/chain-format";
import { parseNumber } from "@/lib/format/parse-number";
import { toCelsius } from "@/lib/format/temperature";
import { medianOf } from "../view/past-weeks";
import { NumberLane } from "./number-lane";

type TemperatureLaneProps = { curve: Curve & { x: number[] }; level: number };

export const TemperatureLane = ({ curve, level }: TemperatureLaneProps) => {
  const format = useChainFormat();
  const isFahrenheit = useChain()?.temperatureUnit === "fahrenheit";
  const middle = medianOf(curve.seen);
  const [low, high] = [curve.x[0], curve.x[curve.x.length - 1]];
  const parse = (text: string) => {
    const typed = parseNumber(text);
    return typed !== null && isFahrenheit ? toCelsius(typed) : typed;
  };
  return (
    <NumberLane
      curve={curve}
      level={level}
      label="Temperature"
      title="Demand by temperature, in times an average week"
      steps={{ min: low, max: high, step: 0.5 }}
      start={middle ?? (low + high) / 2}
      baseline={middle}
      format={format.temperature}
      formatTick={format.degrees}
      parse={parse}
      detail={() => middle !== null && `half the weeks below ${format.temperature(middle)}`}
    />
  );
};
