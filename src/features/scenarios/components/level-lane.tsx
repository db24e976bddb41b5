import { useMemo } from "react";
import type { PlanCell } from "@shared/contract/scenarios";
import { laneCurve } from "@shared/planning";
import { FactorLane } from "@/components/charts/factor-lane/factor-lane";
import type { FactorLevel } from "@/components/charts/factor-lane/factor-level";
import { useChainFormat } from "@/lib/format/chain-format";
import { laneEffect } from "../view/lane-effect";
import { laneLevel } from "../view/plan-values";
import { driverWords } from "../view/sum-parts";
import type { BenchProps } from "./bench-lanes";
import { UnlearntLane } from "./unlearnt-lane";

type Field = "promotion" | "mechanic";
type LevelLaneProps = BenchProps & { driver: string; field: Field; levels: readonly { value: string; label: string }[] };

/** A driver of a few levels, one picked for all store-weeks. */
export const LevelLane = ({ figures, level, readOnly, set, driver, field, levels }: LevelLaneProps) => {
  const format = useChainFormat();
  const { laneStores, cells, prediction } = figures;
  const words = driverWords(driver);
  const shown = useMemo((): FactorLevel[] | null => {
    const curve = laneCurve({ stores: laneStores, driver, level });
    if (!curve) return null;
    const names = Array.from<number | string, string>(curve.x, String);
    return levels.map(({ value, label }) => {
      const index = names.indexOf(value);
      const weeks = index < 0 ? 0 : Math.round(curve.supportCount[index]);
      if (index < 0) return { value, label, weeks, estimate: null, lower: null, upper: null };
      const at = (numbers: Float64Array) => Math.exp(numbers[index]);
      const isHardlySeen = curve.hardlySeen[index] === 1;
      return { value, label, weeks, isHardlySeen, estimate: at(curve.estimate), lower: at(curve.lower), upper: at(curve.upper) };
    });
  }, [laneStores, driver, level, levels]);

  // A mechanic these stores never used is no lane; a promotion they never had is worth saying.
  if (!shown) return field === "mechanic" ? null : <UnlearntLane driver={words.colour} label={words.label} />;
  const chosen = laneLevel(cells.map((cell) => cell[field]));
  return (
    <FactorLane
      driver={words.colour}
      label={words.label}
      title={`Demand by ${words.label.toLowerCase()}, relative to none`}
      levels={shown}
      value={chosen}
      baseline="none"
      onChange={(value) => set(field, value === "none" ? undefined : (value as PlanCell[Field]))}
      readOnly={readOnly}
      detail={chosen === null ? "differs between store-weeks" : "base none"}
      effect={laneEffect(prediction.split.find((row) => row.driver === driver), { format })}
    />
  );
};
