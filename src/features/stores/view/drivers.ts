import type { DriverColour } from "@/components/charts/drivers";

export type ComparedDriver = "price" | "season" | "temperature" | "promotion";

/** Drivers that can be compared across stores, in the order of the lanes. */
export const comparedDrivers: readonly { value: ComparedDriver; label: string; driver: DriverColour }[] = [
  { value: "price", label: "Price", driver: "price" },
  { value: "season", label: "Week of year", driver: "week" },
  { value: "temperature", label: "Temperature", driver: "temperature" },
  { value: "promotion", label: "Promotion", driver: "promotion" },
];

export const driverFrom = (text: string | null): ComparedDriver =>
  comparedDrivers.find(({ value }) => value === text)?.value ?? "price";

export const pictureTitles: Record<ComparedDriver, string> = {
  price: "Demand by price, relative to each store's own at the anchor price",
  season: "Demand by week of year, relative to each store's average week",
  temperature: "Demand by temperature, relative to each store's average week",
  promotion: "Demand in a promoted week, relative to the same store without promotion",
};
