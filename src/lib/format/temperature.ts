import { missing, thinSpace } from "./glyphs";
import { formatNumber } from "./number";

export type TemperatureUnit = "celsius" | "fahrenheit";

export const toFahrenheit = (celsius: number): number => celsius * 1.8 + 32;
export const toCelsius = (fahrenheit: number): number => (fahrenheit - 32) / 1.8;

/** A temperature kept in degrees Celsius, in the unit the chain reads: "24 °C", "75 °F". */
export const formatTemperature = (
  celsius: number | null | undefined,
  options: { unit?: TemperatureUnit; digits?: number } = {},
): string => {
  if (celsius === null || celsius === undefined || !Number.isFinite(celsius)) return missing;
  const { unit = "celsius", digits = 0 } = options;
  const value = unit === "fahrenheit" ? toFahrenheit(celsius) : celsius;
  return `${formatNumber(value, { digits })}${thinSpace}${unit === "fahrenheit" ? "°F" : "°C"}`;
};

/** On an axis the unit would repeat: "24°". */
export const formatDegrees = (celsius: number, unit: TemperatureUnit = "celsius"): string =>
  `${formatNumber(unit === "fahrenheit" ? toFahrenheit(celsius) : celsius)}°`;
