import { yearFraction } from "@shared/calendar";
import type { Random } from "../random";
import type { Region, TemperatureRow } from "../types";
import { autoregression } from "./autoregression";

type Climate = { meanC: number; swingC: number };

const climates: Record<Region, Climate> = {
  Coast: { meanC: 10.8, swingC: 5.6 },
  Town: { meanC: 10.4, swingC: 8 },
  Moor: { meanC: 8.1, swingC: 7.6 },
};

const warmestYearFraction = 0.56;
/** Weather that all regions share lasts a while; the rest is a region's own. */
const sharedWeather = { spread: 2.3, persistence: 0.45 };
const regionalSpreadC = 0.9;

/** A week's temperature for each region: the season of its climate, weather all share, and a little of its own. */
export function makeTemperatures({ weeks, random }: { weeks: string[]; random: Random }): TemperatureRow[] {
  const shared = autoregression({ count: weeks.length, random, ...sharedWeather });
  return weeks.flatMap((week, index) =>
    Object.entries(climates).map(([region, { meanC, swingC }]) => {
      const season = swingC * Math.cos(2 * Math.PI * (yearFraction(week) - warmestYearFraction));
      const temperatureC = meanC + season + shared[index] + regionalSpreadC * random.normal();
      return { week, region: region as Region, temperatureC: Math.round(temperatureC * 10) / 10 };
    }),
  );
}
