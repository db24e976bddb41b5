import type { EventCode } from "../chain/events";
import { products } from "../chain/products";
import type { PromotionLevel } from "../types";
import type { PriceCurve, SeasonWave, TemperatureCurve } from "./curves";

/** What really drives a product's weekly units, before a store's own deviations. Effects are on the log scale. */
export type ProductTruth = {
  /** Units a week in the average store at the anchor price, 10 degrees, average season, no promotion and no event. */
  weeklyUnits: number;
  price: PriceCurve;
  season: SeasonWave[];
  /** Height of the summer wave that visitors add in stores on the coast. */
  coastVisitors: number;
  temperature: TemperatureCurve;
  promotion: Record<PromotionLevel, number>;
  events: Partial<Record<EventCode, number>>;
  /** Variance of a row's units over their mean: 1 is Poisson. */
  dispersion: number;
};

type Demand = [weeklyUnits: number, dispersion: number];
type Price = [elasticityBelow: number, elasticityAbove: number, bendAt: number];
type Wave = [amplitude: number, crest: number];
type Season = [...yearly: Wave, ...halfYearly: Wave];
type Temperature = [perDegree: number, from: number];
type Promotion = [feature: number, display: number, both: number];

type TruthLine = {
  demand: Demand;
  price: Price;
  season: Season;
  coast?: number;
  temperature: Temperature;
  promotion: Promotion;
  events?: ProductTruth["events"];
};

const lines: Record<string, TruthLine> = {
  P101: {
    demand: [142, 1.8], price: [-1.7, -2.5, 0.92], season: [0.24, 0.5, 0.05, 0.42], coast: 0.1,
    temperature: [0.035, 14], promotion: [0.36, 0.22, 0.55],
    events: { easter: 0.1, spring_fair: 0.25, regatta: 0.22, winter_feast: 0.18 },
  },
  P102: {
    demand: [205, 1.9], price: [-2.1, -2.1, 1], season: [0.12, 0.52, 0.06, 0.02], coast: 0.08,
    temperature: [0.02, 13], promotion: [0.32, 0.2, 0.5],
    events: { easter: 0.08, spring_fair: 0.16, regatta: 0.15, winter_feast: 0.3 },
  },
  P103: {
    demand: [120, 1.6], price: [-1.4, -1.4, 1], season: [0.18, 0.54, 0.03, 0.5], coast: 0.1,
    temperature: [0.045, 17], promotion: [0.22, 0.26, 0.46],
    events: { regatta: 0.2 },
  },
  P201: {
    demand: [64, 1.7], price: [-2.4, -2.4, 1], season: [0.3, 0.51, 0.04, 0.45], coast: 0.08,
    temperature: [0.03, 12], promotion: [0.42, 0.25, 0.62],
    events: { easter: 0.12, winter_feast: 0.24, regatta: 0.1 },
  },
  P202: {
    demand: [52, 2], price: [-1.2, -2.3, 0.9], season: [0.5, 0.52, 0.08, 0.52], coast: 0.14,
    temperature: [0.06, 16], promotion: [0.3, 0.28, 0.54],
    events: { spring_fair: 0.15, regatta: 0.3 },
  },
  P203: {
    demand: [47, 1.8], price: [-2, -2.8, 0.95], season: [0.36, 0.5, 0.05, 0.48], coast: 0.1,
    temperature: [0.04, 14], promotion: [0.38, 0.24, 0.58],
    events: { easter: 0.1, regatta: 0.2 },
  },
  P301: {
    demand: [88, 2.2], price: [-2.9, -2.2, 0.85], season: [0.08, 0.98, 0.03, 0.2],
    temperature: [-0.006, 12], promotion: [0.5, 0.3, 0.72],
    events: { easter: 0.14, winter_feast: 0.26 },
  },
  P302: {
    demand: [96, 1.5], price: [-1.3, -1.3, 1], season: [0.14, 0.03, 0.02, 0.1],
    temperature: [-0.01, 11], promotion: [0.28, 0.18, 0.42],
    events: { winter_feast: 0.1 },
  },
  P303: {
    demand: [41, 1.6], price: [-1.5, -2.2, 1.02], season: [0.42, 0.01, 0.07, 0.93],
    temperature: [-0.024, 8], promotion: [0.34, 0.22, 0.5],
    events: { autumn_holidays: 0.14, winter_feast: 0.2 },
  },
  P401: {
    demand: [232, 2.1], price: [-1.6, -1, 0.88], season: [0.1, 0.95, 0.05, 0.26],
    temperature: [-0.004, 10], promotion: [0.4, 0.16, 0.5],
    events: { easter: 0.22, winter_feast: 0.38, autumn_holidays: 0.06 },
  },
  P402: {
    demand: [24, 0.5], price: [-1.5, -1.5, 1], season: [0.07, 0.97, 0.02, 0.3],
    temperature: [-0.005, 12], promotion: [0.34, 0.2, 0.48],
    events: { easter: 0.12, winter_feast: 0.35 },
  },
  P403: {
    demand: [140, 1.5], price: [-1, -1, 1], season: [0.06, 0.36, 0.02, 0.4],
    temperature: [0.008, 12], promotion: [0.25, 0.14, 0.36],
    events: { winter_feast: -0.18 },
  },
  P501: {
    demand: [112, 1.7], price: [-1.9, -1.9, 1], season: [0.38, 0.99, 0.06, 0.95],
    temperature: [-0.02, 7], promotion: [0.3, 0.3, 0.56],
    events: { autumn_holidays: 0.1, winter_feast: -0.1 },
  },
  P502: {
    demand: [84, 1.6], price: [-2.3, -1.5, 0.86], season: [0.05, 0.9, 0.03, 0.7],
    temperature: [-0.004, 12], promotion: [0.34, 0.26, 0.55],
    events: { autumn_holidays: 0.16, winter_feast: -0.14 },
  },
  P503: {
    demand: [76, 1.4], price: [-0.3, -1.6, 0.98], season: [0.2, 0.03, 0.09, 0.04],
    temperature: [-0.012, 9], promotion: [0.2, 0.16, 0.34],
  },
  P601: {
    demand: [38, 2.4], price: [-3.1, -2.4, 0.84], season: [0.04, 0.3, 0.04, 0.24],
    temperature: [0.003, 12], promotion: [0.55, 0.34, 0.82],
    events: { winter_feast: -0.12 },
  },
  P602: {
    demand: [104, 1.4], price: [-1.1, -1.1, 1], season: [0.03, 0.97, 0.02, 0.2],
    temperature: [0.003, 12], promotion: [0.24, 0.2, 0.4],
    events: { easter: 0.04, winter_feast: 0.12 },
  },
  P603: {
    demand: [92, 1.8], price: [-1.8, -1.8, 1], season: [0.04, 0.45, 0.02, 0.95],
    temperature: [0.004, 14], promotion: [0.36, 0.32, 0.66],
    events: { spring_fair: 0.08, winter_feast: 0.16 },
  },
};

function truthOf(line: TruthLine, anchorPrice: number): ProductTruth {
  const [elasticityBelow, elasticityAbove, bendAt] = line.price;
  const [yearlyAmplitude, yearlyCrest, halfYearlyAmplitude, halfYearlyCrest] = line.season;
  const [perDegree, from] = line.temperature;
  const [feature, display, both] = line.promotion;
  const [weeklyUnits, dispersion] = line.demand;
  return {
    weeklyUnits,
    dispersion,
    price: { anchorPrice, elasticityBelow, elasticityAbove, bendAt },
    season: [
      { amplitude: yearlyAmplitude, crest: yearlyCrest, timesAYear: 1 },
      { amplitude: halfYearlyAmplitude, crest: halfYearlyCrest, timesAYear: 2 },
    ],
    coastVisitors: line.coast ?? 0,
    temperature: { perDegree, from },
    promotion: { none: 0, feature, display, both },
    events: line.events ?? {},
  };
}

/** The truths by product code; every price curve is anchored at the product's latest regular price. */
export const productTruths: Record<string, ProductTruth> = Object.fromEntries(
  products.map(({ code, prices }) => [code, truthOf(lines[code], prices[prices.length - 1].regularPrice)]),
);
