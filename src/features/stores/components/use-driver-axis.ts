import { useCallback } from "react";
import { monthTicks } from "@/components/charts/scale/month-ticks";
import type { LabelledTick } from "@/components/charts/scale/month-ticks";
import { useChainFormat } from "@/lib/format/chain-format";
import type { ComparedDriver } from "../view/drivers";

type DriverAxis = { label: string; format: (x: number) => string; ticks?: readonly LabelledTick[] };

const months = monthTicks(1);
const monthAt = (fraction: number) =>
  [...months].reverse().find(({ value }) => value <= fraction + 1e-9)?.label ?? "Jan";
const labels: Record<ComparedDriver, string> = {
  price: "Price",
  season: "Week of year",
  temperature: "Temperature",
  promotion: "Promotion",
};

/** How a driver's values are written along the picture's foot. */
export const useDriverAxis = (driver: ComparedDriver): DriverAxis => {
  const format = useChainFormat();
  const write = useCallback(
    (x: number) => (driver === "price" ? format.price(x) : driver === "season" ? monthAt(x) : format.temperature(x)),
    [driver, format],
  );
  return { label: labels[driver], format: write, ticks: driver === "season" ? months : undefined };
};
