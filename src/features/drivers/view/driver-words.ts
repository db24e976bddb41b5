import type { DriverColour } from "@/components/charts/drivers";

const colours: Record<string, DriverColour> = {
  price: "price",
  season: "week",
  temperature: "temperature",
  promotion: "promotion",
  mechanic: "promotion",
  deal: "promotion",
  event: "event",
  trend: "trend",
};

const labels: Record<string, string> = {
  price: "Price",
  season: "Week of year",
  temperature: "Temperature",
  promotion: "Promotion",
  mechanic: "Mechanic",
  deal: "Deal",
  event: "Event",
  trend: "Trend",
};

/** Drivers of the trade have their colour; whatever else a person puts into a model takes the trend's grey. */
export const driverColour = (driver: string): DriverColour => colours[driver] ?? "trend";

export const driverLabel = (driver: string): string =>
  labels[driver] ??
  driver
    .split(":")
    .map((part) => labels[part] ?? part)
    .join(" × ");

const order = ["price", "season", "temperature", "promotion", "mechanic", "deal", "event", "trend"];

/** Lanes stand in the same order on every page. */
export const inLaneOrder = <Item extends { driver: string }>(items: readonly Item[]): Item[] => {
  const place = ({ driver }: Item) => (order.includes(driver) ? order.indexOf(driver) : order.length);
  return [...items].sort((a, b) => place(a) - place(b));
};
