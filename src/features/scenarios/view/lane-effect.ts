import type { SplitRow } from "@shared/planning";
import type { LaneEffectText } from "@/components/charts/driver-lane/lane-effect";
import type { ChainFormat } from "@/lib/format/chain-format";
import { formatRange } from "@/lib/format/number";

/** What a driver does to the plan, in a lane's three lines; "as base" where it does nothing. */
export function laneEffect(row: SplitRow | undefined, { format, of = "units" }: { format: ChainFormat; of?: string }): LaneEffectText {
  if (!row || (row.units === 0 && row.multiplier.estimate === 1)) return { multiplier: "as base" };
  const { estimate, lower, upper } = row.multiplier;
  return {
    multiplier: format.multiplier(estimate),
    interval: formatRange(format.number(lower, { digits: 2 }), format.number(upper, { digits: 2 })),
    units: `${format.units(row.units, { signed: true })} ${of}`,
  };
}
