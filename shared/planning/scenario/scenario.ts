import type { Day } from "../../calendar";
import type { FittedModel } from "../../engine";
import type { BreakEven } from "../break-even";
import type { Driver } from "../driver";
import type { PlanCosts } from "../money";
import type { Mechanic, Promotion } from "../sales-row";

/** One store-week of a plan: what is planned, and what its base needs. Prices include tax; costs and funding do not. */
export type PlanCell = {
  store: string;
  /** First day of the week. */
  week: Day;
  regularPrice: number;
  /** Price planned; the regular price when it stays. */
  price: number;
  promotion: Promotion;
  mechanic: Mechanic;
  /** Temperature the plan assumes; null takes the normal one. */
  temperatureC: number | null;
  /** What is usual in that store and week; null takes the plan's. */
  normalTemperatureC: number | null;
  /** The chain's event of the week; null for an ordinary week. The base has it too. */
  event: string | null;
  /** Share of open time the product is on the shelf, above 0 and up to 1, which is the default. The base has it too. */
  exposure?: number;
  /** Price paid per unit where a mechanic lowers it below the shelf price (multi-buy); the planned price unless given. */
  pricePaid?: number;
  /** Net of tax; null where it is not known, and then no margin is told. */
  unitCost: number | null;
  /** Share, for example 0.21. */
  taxRate: number;
  /** Supplier's funding per unit sold under the plan, net of tax; 0 unless given. */
  fundingPerUnit?: number;
};

/** A store and the model its units are predicted with. Models of different stores are taken as independent. */
export type StoreModel = { store: string; model: FittedModel };

/** A plan for some stores and weeks, one cell per store-week in any order. */
export type ScenarioPlan = {
  cells: readonly PlanCell[];
  /** Probability every interval holds, for example 0.8. */
  level: number;
  costs?: PlanCosts;
};

/** A number with its interval at the level asked for. */
export type Interval = { estimate: number; lower: number; upper: number };

/** What one driver adds: units, and the multiplier on the base of all store-weeks together. */
export type SplitRow = { driver: Driver; units: number; multiplier: Interval };

export type WeekPrediction = {
  week: Day;
  /** Expected units under the plan, all stores; the interval covers what may be sold (coefficients and noise). */
  units: Interval;
  baseUnits: number;
};

export type StorePrediction = { store: string; units: number; baseUnits: number };

/** Money of plan and base, net of tax, in whole cents; null (and "unknown") where a unit cost is not known. */
export type ScenarioMoney = {
  netSales: { plan: number; base: number };
  /** Supplier's funding per unit included; fixed cost and lump funding not. */
  grossMargin: { plan: number; base: number } | null;
  /** Margin of plan less that of base and all costs of the plan. */
  netGain: number | null;
  breakEven: BreakEven;
};

export type ScenarioFlagCode =
  | "outside-range"
  | "few-weeks"
  | "never-seen"
  | "not-modelled"
  | "below-cost";

/** Something to distrust in a prediction, and where. */
export type ScenarioFlag = {
  code: ScenarioFlagCode;
  driver: Driver | null;
  /** Whether it bears on the planned values or on the base's. */
  of: "plan" | "base";
  stores: string[];
  weeks: Day[];
  /** A sentence for people. */
  detail: string;
};

/** All that a scenario page shows of a plan. */
export type ScenarioPrediction = {
  level: number;
  /** Total under the plan; the interval covers what may be sold (coefficients and noise). */
  units: Interval;
  /** Total at regular price without promotion, in the plan's weather and events. */
  baseUnits: number;
  /** The same in normal weather: where the sum column begins. */
  baseInNormalWeather: number;
  /** Leads from the base in normal weather to the base; its multiplier is their ratio. */
  weather: SplitRow;
  /** Lead from the base to the plan: units add up to the difference, multipliers multiply to 1 + lift. */
  split: SplitRow[];
  /** Plan / base - 1; the interval covers the expected lift (coefficients only). */
  lift: Interval;
  /** In order of weeks. */
  weeks: WeekPrediction[];
  /** In the order the scenario was prepared with. */
  stores: StorePrediction[];
  money: ScenarioMoney;
  flags: ScenarioFlag[];
};
