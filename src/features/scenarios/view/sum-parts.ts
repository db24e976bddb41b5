import type { ScenarioPrediction } from "@shared/planning";
import type { DriverColour } from "@/components/charts/drivers";
import type { SumPart } from "@/components/charts/sum-column/sum-layout";

type DriverWords = { label: string; short: string; colour: DriverColour };

const words: Record<string, DriverWords> = {
  price: { label: "Price", short: "Price", colour: "price" },
  season: { label: "Week of year", short: "Week", colour: "week" },
  temperature: { label: "Temperature", short: "Weather", colour: "temperature" },
  promotion: { label: "Promotion", short: "Promo", colour: "promotion" },
  mechanic: { label: "Mechanic", short: "Mechanic", colour: "promotion" },
  deal: { label: "Deal", short: "Deal", colour: "promotion" },
  trend: { label: "Trend", short: "Trend", colour: "trend" },
  event: { label: "Event", short: "Event", colour: "event" },
};

/** How a driver is named and coloured; an interaction takes its first driver's colour. */
export function driverWords(driver: string): DriverWords {
  const known = words[driver];
  if (known) return known;
  const [first, ...rest] = driver.split(":").map((part) => words[part]?.label ?? part);
  const label = [first, ...rest.map((part) => part.toLowerCase())].join(" × ");
  return { label, short: label, colour: words[driver.split(":")[0]]?.colour ?? "trend" };
}

/** The column's bars: base in normal weather, what the weather adds, each driver's units, the plan. */
export function sumParts(prediction: ScenarioPrediction): SumPart[] {
  const { weather, split } = prediction;
  const hasWeather = weather.units !== 0;
  return [
    { id: "base", label: hasWeather ? "Normal" : "Base", kind: "level", units: prediction.baseInNormalWeather },
    ...(hasWeather
      ? [
          { id: "weather", label: "Weather", kind: "step" as const, units: weather.units, driver: "temperature" as const },
          { id: "base-weather", label: "Base", kind: "level" as const, units: prediction.baseUnits },
        ]
      : []),
    ...split
      .filter((row) => row.units !== 0)
      .map((row) => ({ id: row.driver, label: driverWords(row.driver).short, kind: "step" as const, units: row.units, driver: driverWords(row.driver).colour })),
    { id: "plan", label: "Plan", kind: "total", units: prediction.units.estimate },
  ];
}
