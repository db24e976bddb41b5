import { fitModel } from "@shared/engine";
import type { ModelSpec, TermSpec } from "@shared/engine";
import { seededNormal, seededUniform } from "../../engine/support/generator";
import { median } from "./time-fits";

/** How one fit's time grows: milliseconds of processor time at each size. */
export type GrowthPanel = {
  title: string;
  /** What the horizontal axis counts, as it is labelled. */
  across: string;
  lines: { label: string; points: { size: number; ms: number }[] }[];
};

const season = { kind: "cyclic-smooth", column: "yearFraction", period: [0, 1] as [number, number] } as const;
const price = { kind: "smooth", column: "price", log: true, size: 8 } as const;
const ownTerms: TermSpec[] = [price, season, { kind: "factor", column: "promotion" }];

/** Weekly sales of so many stores, with a price curve of each store's own, and drivers d1, d2, ... that do little. */
function salesRows({ rows, stores = 1, drivers = 0 }: { rows: number; stores?: number; drivers?: number }) {
  const [uniform, normal] = [seededUniform(rows + stores), seededNormal(drivers + 1)];
  const store = Array.from({ length: rows }, (_, row) => `S${row % stores}`);
  const steepness = Array.from({ length: stores }, () => -2 + 0.4 * normal());
  const levels = Array.from({ length: stores }, () => 0.5 * normal());
  const price = Float64Array.from(store, () => Math.round(100 * (1 + uniform())) / 100);
  const yearFraction = Float64Array.from(store, (_, row) => ((Math.floor(row / stores) + 0.5) / 52) % 1);
  const promotion = store.map(() => (uniform() < 0.2 ? "feature" : uniform() < 0.1 ? "display" : "none"));
  const others = Object.fromEntries(Array.from({ length: drivers }, (_, k) => [`d${k + 1}`, Float64Array.from(store, uniform)]));
  const logUnits = Float64Array.from(store, (_, row) =>
    4 + levels[row % stores] + steepness[row % stores] * Math.log(price[row]) - 0.8 * Math.log(price[row]) ** 2
    + 0.3 * Math.sin(2 * Math.PI * yearFraction[row]) + (promotion[row] === "feature" ? 0.5 : 0)
    + Object.values(others).reduce((sum, values, k) => sum + 0.1 * Math.sin((k + 2) * values[row]), 0) + 0.25 * normal());
  return { store, price, yearFraction, promotion, logUnits, units: logUnits.map((value) => Math.round(Math.exp(value))), ...others };
}

const families = [
  { label: "normal", response: "logUnits", family: "gaussian" }, { label: "quasi-Poisson", response: "units", family: "quasi-poisson" },
] as const;

/** Median of as many warm fits as half a second holds, three at least. */
function timeFit(spec: ModelSpec, data: ReturnType<typeof salesRows>): number {
  const times: number[] = [];
  const end = process.cpuUsage().user + 500_000;
  for (let turn = 0; turn < 5; turn++) fitModel(spec, data);
  while (times.length < 3 || process.cpuUsage().user < end) {
    const before = process.cpuUsage();
    fitModel(spec, data);
    const { user, system } = process.cpuUsage(before);
    times.push((user + system) / 1000);
  }
  return median(times);
}

type Growing = { sizes: readonly number[]; dataOf: (size: number) => ReturnType<typeof salesRows>; termsOf: (size: number) => TermSpec[] };

function linesOf({ sizes, dataOf, termsOf }: Growing): GrowthPanel["lines"] {
  const sets = sizes.map((size) => ({ size, data: dataOf(size) }));
  return families.map(({ label, response, family }) => ({
    label, points: sets.map(({ size, data }) => ({ size, ms: timeFit({ response, family, terms: termsOf(size) }, data) })),
  }));
}

/** A few seconds for each of rows, stores and terms. */
export function measureGrowth(): GrowthPanel[] {
  return [
    {
      title: "Rows", across: "rows, price and season curves",
      lines: linesOf({
        sizes: [2_000, 10_000, 20_000, 40_000, 60_000, 80_000, 100_000], dataOf: (rows) => salesRows({ rows }), termsOf: () => ownTerms,
      }),
    },
    {
      title: "Stores", across: "stores of 104 weeks, a price curve each",
      lines: linesOf({
        sizes: [10, 40, 80, 120, 160, 200], dataOf: (stores) => salesRows({ rows: 104 * stores, stores }),
        termsOf: () => [...ownTerms, { kind: "factor-smooth", id: "price by store", column: "price", log: true, group: "store" }],
      }),
    },
    {
      title: "Terms", across: "curves, 5,000 rows",
      lines: linesOf({
        sizes: [2, 4, 6, 8, 10, 12], dataOf: (terms) => salesRows({ rows: 5_000, drivers: terms - 2 }),
        termsOf: (terms) => [...ownTerms, ...Array.from({ length: terms - 2 }, (_, k): TermSpec => ({ kind: "smooth", column: `d${k + 1}` }))],
      }),
    },
  ];
}

/** The panels as a table. */
export function growthLines(panels: readonly GrowthPanel[]): string[] {
  return panels.flatMap(({ across, lines }) => [
    `milliseconds a fit by ${across}`,
    ...lines.map(({ label, points }) => `  ${label.padEnd(16)}${points.map(({ size, ms }) => `${size}: ${ms.toFixed(1)}`).join("   ")}`),
  ]);
}
