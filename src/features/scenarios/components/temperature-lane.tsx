import { useMemo } from "react";
import { laneCurve } from "@shared/planning";
import { DriverLane } from "@/components/charts/driver-lane/driver-lane";
import { unseenRanges } from "@/components/charts/scale/unseen-ranges";
import { Term } from "@/components/ui/term";
import { useChain } from "@/lib/chain";
import { useChainFormat } from "@/lib/format/chain-format";
import { parseNumber } from "@/lib/format/parse-number";
import { toCelsius } from "@/lib/format/temperature";
import { laneEffect } from "../view/lane-effect";
import { axisValues, lanePoints, supportFor } from "../view/lane-points";
import { laneNumber, normalTemperaturesOf, temperaturesOf } from "../view/plan-values";
import { seenValues } from "../view/seen-values";
import type { BenchProps } from "./bench-lanes";
import { UnlearntLane } from "./unlearnt-lane";

/** The plan's weather. It moves base and plan alike: a hot week is no lift. */
export const TemperatureLane = ({ figures, level, readOnly, preview, set }: BenchProps) => {
  const format = useChainFormat();
  const inFahrenheit = useChain()?.temperatureUnit === "fahrenheit";
  const { laneStores, baseCells, cells, prediction } = figures;
  const planned = laneNumber(temperaturesOf(cells));
  const normal = laneNumber(normalTemperaturesOf(baseCells));
  const reference = normal?.value ?? null;

  const still = useMemo(() => {
    const seen = laneCurve({ stores: laneStores, driver: "temperature", level })?.observedRange ?? null;
    if (!seen || reference === null) return null;
    const steps = { min: Math.floor(Math.min(seen[0], reference)) - 1, max: Math.ceil(Math.max(seen[1], reference)) + 1, step: 0.5 };
    const x = axisValues(steps.min, steps.max);
    const curve = laneCurve({ stores: laneStores, driver: "temperature", level, at: x, relativeTo: reference });
    if (!curve) return null;
    return {
      steps,
      points: lanePoints(curve),
      unseen: unseenRanges(x, supportFor(curve)),
      seen: seenValues(laneStores, "temperature"),
    };
  }, [laneStores, level, reference]);

  if (!still || !planned || !normal) return <UnlearntLane driver="temperature" label="Temperature" />;
  const isNormal = cells.every((cell) => cell.temperatureC === null || cell.temperatureC === cell.normalTemperatureC);
  const read = (text: string) => {
    const value = parseNumber(text);
    return value === null || !inFahrenheit ? value : toCelsius(value);
  };
  return (
    <DriverLane
      driver="temperature"
      label="Temperature"
      title="Demand by temperature, relative to normal weather"
      {...still}
      value={planned.value}
      mixed={planned.mixed}
      baseline={normal.value}
      onChange={(temperatureC) => preview("temperatureC", temperatureC)}
      onCommit={(temperatureC) => set("temperatureC", temperatureC)}
      readOnly={readOnly}
      format={format.temperature}
      formatTick={format.degrees}
      parse={read}
      effect={laneEffect(prediction.weather, { format, of: "units, in the base too" })}
      detail={
        isNormal ? (
          <>
            <Term meaning="The mean of the same weeks in the years before, in each store's region.">normal weather</Term>
            {normal.mixed && ", differing by week"}
          </>
        ) : (
          <>
            normal {format.temperature(normal.value)}
            {" · "}
            {!readOnly && (
              <button type="button" className="font-medium text-accent underline underline-offset-2" onClick={() => set("temperatureC", undefined)}>
                back to normal
              </button>
            )}
          </>
        )
      }
    />
  );
};
