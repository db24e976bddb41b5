import { addWeeks, weeksBetween, yearFraction } from "@shared/calendar";
import type { ScenarioDraft } from "@shared/contract/scenarios";
import { ensureChain } from "../../server/features/chain";
import type { Services } from "../../server/services";

/**
 * A small chain whose curves are known: two years of Mondays, four stores in two regions, jam that sells and tea that never
 * did. Store B2 has five weeks only.
 */
export const sample = {
  firstWeek: "2024-01-01",
  lastWeek: addWeeks("2024-01-01", 103),
  now: new Date("2026-01-05T08:00:00Z"),
  stores: [
    { code: "A1", name: "Alder Street", region: "coast", level: 60, elasticity: -1.8, weeks: 104 },
    { code: "A2", name: "Ash Lane", region: "coast", level: 110, elasticity: -2.4, weeks: 104 },
    { code: "B1", name: "Birch Road", region: "moor", level: 35, elasticity: -1.2, weeks: 104 },
    { code: "B2", name: "Beech Row", region: "moor", level: 50, elasticity: -1.5, weeks: 5 },
  ],
  regularPrice: 2,
  unitCost: 1.1,
  taxRate: 0.2,
  /** Announced: holds from the week of 2 February 2026 on. */
  newTerms: { validFrom: "2026-02-01", regularPrice: 2.2, unitCost: 1.15, taxRate: 0.2 },
  fair: { code: "fair", firstDay: "2026-01-21", lastDay: "2026-01-27" },
} as const;

/** A plan of the sample's winter: two stores that can be predicted, and one that cannot. */
export const sampleDraft: ScenarioDraft = {
  name: "Winter jam",
  product: "JAM",
  stores: ["A1", "A2", "B2"],
  weeks: { first: "2026-01-12", last: "2026-02-16" },
  cells: [
    { store: "A1", week: "2026-01-19", price: 1.6, promotion: "feature" },
    { store: "A2", week: "2026-01-19", price: 1.5, promotion: "both", temperatureC: 1 },
    { store: "A2", week: "2026-02-09", price: 1.9 },
  ],
  fixedCost: 40,
};

export type SampleRow = {
  store: string;
  week: string;
  units: number;
  price: number;
  feature: boolean;
  display: boolean;
  temperatureC: number;
};

const extractId = "00000000-0000-4000-8000-000000000001";
const prices = [2, 2, 2, 1.6, 2, 1.8, 2, 2.1, 2, 1.5, 2, 1.9, 2];

/** A number from -0.5 to 0.5 that looks like chance and is always the same. */
const wobble = (seed: number) => ((Math.sin(seed * 12.9898) * 43758.5453) % 1) / 2;

/** Weekly mean of a region: warm in July, a degree colder on the moor. */
export function sampleTemperature(region: string, week: string): number {
  const warmth = 11 - 8 * Math.cos(2 * Math.PI * (yearFraction(week) - 0.05));
  const year = Number(week.slice(0, 4)) - 2024;
  return Math.round((warmth + year + (region === "moor" ? -1 : 0)) * 10) / 10;
}

/** Every row of jam. */
export function sampleRows(): SampleRow[] {
  const weeks = weeksBetween(sample.firstWeek, sample.lastWeek);
  return sample.stores.flatMap((store, place) =>
    weeks.slice(-store.weeks).map((week) => {
      const index = weeks.indexOf(week);
      const price = prices[(index + 3 * place) % prices.length];
      const feature = (index + place) % 9 === 0;
      const display = (index + 2 * place) % 11 === 0;
      const temperatureC = sampleTemperature(store.region, week);
      const logUnits =
        Math.log(store.level) +
        store.elasticity * Math.log(price / 2) +
        0.02 * (temperatureC - 11) +
        (feature ? 0.35 : 0) +
        (display ? 0.25 : 0) +
        0.3 * wobble(index + 1000 * place);
      return {
        store: store.code,
        week,
        units: Math.max(1, Math.round(Math.exp(logUnits))),
        price,
        feature,
        display,
        temperatureC,
      };
    }),
  );
}

/** Fills the database with the sample chain. */
export async function loadSample(services: Services): Promise<void> {
  await ensureChain(services.orm.em.fork(), { name: "Sample Stores", weekStart: 1 });
  const run = (sql: string, values: unknown[] = []) => services.pool.query(sql, values);
  await run("insert into categories (code, name) values ('spreads', 'Spreads'), ('drinks', 'Drinks')");
  await run(
    `insert into products (code, name, category_id)
     values ('JAM', 'Plum jam', (select id from categories where code = 'spreads')),
       ('TEA', 'Nettle tea', (select id from categories where code = 'drinks'))`,
  );
  await run(
    `insert into stores (code, name, region)
     select code, name, region from jsonb_to_recordset($1) as s(code text, name text, region text)`,
    [JSON.stringify(sample.stores)],
  );
  await run(
    `insert into product_terms (product_id, valid_from, unit_cost, regular_price, tax_rate)
     select p.id, t.valid_from, t.unit_cost, t.regular_price, t.tax_rate
     from products p, (values ('2023-01-01'::date, $1::numeric, $2::numeric, $3::numeric), ($4::date, $5, $6, $7))
       as t(valid_from, unit_cost, regular_price, tax_rate)
     where p.code = 'JAM'`,
    [
      sample.unitCost,
      sample.regularPrice,
      sample.taxRate,
      sample.newTerms.validFrom,
      sample.newTerms.unitCost,
      sample.newTerms.regularPrice,
      sample.newTerms.taxRate,
    ],
  );
  await run(
    "insert into events (code, name, first_day, last_day, region) values ($1, 'Winter fair', $2, $3, 'coast')",
    [sample.fair.code, sample.fair.firstDay, sample.fair.lastDay],
  );
  await loadTemperatures(services);
  await loadRows(services, sampleRows());
}

async function loadTemperatures(services: Services): Promise<void> {
  const rows = weeksBetween(sample.firstWeek, sample.lastWeek).flatMap((week) =>
    ["coast", "moor"].map((region) => ({ week, region, temperature_c: sampleTemperature(region, week) })),
  );
  await services.pool.query(
    `insert into temperatures (week, region, temperature_c)
     select week, region, temperature_c from jsonb_to_recordset($1) as t(week date, region text, temperature_c float8)`,
    [JSON.stringify(rows)],
  );
}

/** Adds rows of jam, as a load would leave them. */
export async function loadRows(services: Services, rows: readonly SampleRow[]): Promise<void> {
  const years = [...new Set(rows.map(({ week }) => Number(week.slice(0, 4))))];
  for (const year of years) await services.pool.query("select ensure_sales_partition($1)", [year]);
  await services.pool.query(
    `insert into weekly_sales (product_id, store_id, week, units, net_sales, regular_price, shelf_price, price, price_source,
       feature, display, mechanic, extract_id)
     select p.id, s.id, r.week, r.units, r.units * r.price, $2, r.price, r.price, 'shelf', r.feature, r.display, 'none', $3
     from jsonb_to_recordset($1) as r(store text, week date, units numeric, price numeric, feature boolean, display boolean)
     join stores s on s.code = r.store
     join products p on p.code = 'JAM'`,
    [JSON.stringify(rows), sample.regularPrice, extractId],
  );
}
