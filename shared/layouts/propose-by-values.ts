import type { NumberFormat } from "../contract/layouts";
import { most, type ColumnProfile } from "./column-profile";
import { shareOf } from "./detected";
import { chooseOnce, type Proposal } from "./propose-mapping";
import { numberReader } from "./read-number";

export type ValueContext = {
  profiles: readonly ColumnProfile[];
  columns: readonly string[];
  format: NumberFormat;
  hasHeader: boolean;
  /** What names have told; it stays. */
  named: readonly Proposal[];
};

/**
 * Columns of ours for those columns of a file whose names say nothing, by their values: days, GTINs, and the three numbers of
 * a sale, which hang together. Without a header also codes and 0/1 columns, in the order in which ours stand; those are
 * guesses.
 */
export function proposeByValues(context: ValueContext): Proposal[] {
  const found: Proposal[] = [];
  for (const propose of [proposeDays, proposeGtins, proposeSale, proposeFlags, proposeTemperature, proposeCodes]) {
    const taken = [...context.named, ...found];
    const free = context.profiles.filter(({ position, values }) => values.length > 0 && taken.every((one) => one.position !== position));
    const columns = context.columns.filter((column) => taken.every((one) => one.column !== column));
    found.push(...chooseOnce(propose({ ...context, profiles: free, columns, all: context.columns }), taken));
  }
  return found;
}

/** The names that are free, among the profiles that are. */
type Propose = (free: ValueContext & { all: readonly string[] }) => Proposal[];

const proposeDays: Propose = ({ profiles, columns }) => {
  const targets = ["week", "first_day", "last_day"].filter((column) => columns.includes(column));
  const days = profiles.filter((profile) => profile.days >= most || countsWeeks(profile));
  if (days.length !== targets.length && !targets.includes("week")) return [];
  return targets.flatMap((column, at) => {
    const profile = days[at];
    return profile ? [{ position: profile.position, column, score: days.length === targets.length ? 0.7 : 0.5, why: "Its values are days or weeks" }] : [];
  });
};

/** Day numbers of a spreadsheet, whole weeks apart. */
function countsWeeks({ serialDays, values, distinct }: ColumnProfile): boolean {
  return serialDays === 1 && distinct > 1 && new Set(values.map((value) => Number(value) % 7)).size === 1;
}

const proposeGtins: Propose = ({ profiles, columns }) => {
  const column = columns.includes("gtin") ? "gtin" : "product";
  if (!columns.includes(column)) return [];
  return profiles
    .filter(({ gtins }) => gtins >= most)
    .map(({ position }) => ({ position, column, score: 0.8, why: "Its values are GTINs with their check digit" }));
};

const isAmount = ({ numbers, days, gtins, serialDays }: ColumnProfile) => numbers >= most && days < most && gtins < most && serialDays < most;
/** Of more columns than these not every three are tried. */
const mostTried = 10;
const rowsTried = 200;

/** Units x price is net sales, or somewhat more where a promotion lowered it. */
const proposeSale: Propose = ({ profiles, columns, format }) => {
  const price = ["regular_price", "shelf_price"].find((column) => columns.includes(column));
  if (!columns.includes("units") || !columns.includes("net_sales") || !price) return [];
  const read = numberReader(format);
  const amounts = profiles
    .filter((profile) => isAmount(profile) && profile.emptyShare === 0)
    .slice(0, mostTried)
    .map((profile) => ({ position: profile.position, values: profile.values.slice(0, rowsTried).map((value) => Number(read(value) ?? Number.NaN)) }));
  for (const units of amounts) {
    for (const prices of amounts) {
      for (const sales of amounts) {
        if (new Set([units, prices, sales]).size < 3 || !areSale(units.values, prices.values, sales.values)) continue;
        if (wholeness(prices.values) > wholeness(units.values)) continue;
        return saleOf([[units, "units"], [sales, "net_sales"], [prices, price]]);
      }
    }
  }
  return [];
};

const saleOf = (columns: [{ position: number }, string][]): Proposal[] =>
  columns.map(([{ position }, column]) => ({ position, column, score: 0.7, why: "Units times price is about net sales in these columns" }));

const wholeness = (values: readonly number[]) => shareOf(values, Number.isInteger);

function areSale(units: readonly number[], prices: readonly number[], sales: readonly number[]): boolean {
  const rows = units.map((value, at) => ({ full: value * (prices[at] ?? Number.NaN), paid: sales[at] ?? Number.NaN })).filter(({ paid }) => paid > 0);
  // Where all prices are 1, or units and sales are the same throughout, the numbers say nothing.
  const differ = prices.some((price) => price !== 1) && new Set(units).size > 1 && new Set(sales).size > 1 && rows.length >= 3;
  return differ && shareOf(rows, ({ full, paid }) => paid <= full * 1.02 && paid >= full * 0.3) >= 0.9;
}

const proposeFlags: Propose = ({ profiles, columns, hasHeader }) => {
  if (hasHeader) return [];
  const flags = profiles.filter(({ values }) => values.every((value) => value === "0" || value === "1") && new Set(values).size === 2);
  const targets = ["feature", "display"].filter((column) => columns.includes(column));
  return targets.flatMap((column, at) => {
    const profile = flags[at];
    return profile ? [{ position: profile.position, column, score: 0.3, why: "Its values are 0 and 1; a guess by its place" }] : [];
  });
};

/** Codes repeat; the first is taken for the store, the second for the product. */
const proposeCodes: Propose = ({ profiles, columns, hasHeader }) => {
  if (hasHeader) return [];
  const codes = profiles.filter(({ values, days }) => days < most && values.every((value) => !/[.,]\d/.test(value)) && !values.every((value) => /^[01]$/.test(value)));
  const targets = ["store", "product"].filter((column) => columns.includes(column));
  return targets.flatMap((column, at) => {
    const profile = codes[at];
    return profile ? [{ position: profile.position, column, score: 0.4, why: "Its values look like codes; a guess by its place" }] : [];
  });
};

/** A file of temperatures has one number in a row. */
const proposeTemperature: Propose = ({ profiles, columns, all }) => {
  const [only, ...others] = profiles.filter(isAmount);
  if (!only || others.length > 0 || !columns.includes("temperature_c") || all.includes("units")) return [];
  return [{ position: only.position, column: "temperature_c", score: 0.5, why: "Its values are the only numbers" }];
};
