import type { ModelData } from "../engine";
import { modelColumns } from "./model-columns";
import type { ModelCell } from "./model-columns";
import { NO_EVENT, promotionOf } from "./sales-row";
import type { SalesRow } from "./sales-row";

/** What became of the weeks handed in; `kept` + the five kinds left out = `rows`. */
export type RowCounts = {
  rows: number;
  kept: number;
  /** Left out: sold out on every open day. */
  soldOut: number;
  /** Left out: the store did not open. */
  closed: number;
  /** Left out: nothing tells the price. */
  withoutPrice: number;
  /** Left out: no temperature, in a series that has it nearly everywhere. */
  withoutTemperature: number;
  /** Kept: sold out on some open days, entered with the exposure that remained. */
  partlySoldOut: number;
  /** Kept: more returned than sold, modelled as zero. */
  netReturns: number;
};

/** Columns for the engine, the rows they were made from in the same order, and what was left out. */
export type SalesModelData = { data: ModelData; rows: SalesRow[]; counts: RowCounts };

const DAYS_OPEN_UNLESS_SAID = 7;

/** Up to this share of weeks without a temperature, the weeks are left out; beyond it, the driver is. */
const SHARE_WITHOUT_TEMPERATURE = 0.1;

/**
 * Makes the columns of a sales model from stored weeks: those of `modelColumns` and `units` (net returns as zero).
 *
 * A partly sold-out week enters with exposure (open days - sold-out days) / open days; a fully sold-out one, a closed one and
 * one without a price are left out; all are counted. Weeks without a temperature are left out when they are at most a tenth;
 * else the whole column is.
 *
 * @param rows weeks of one product, of one store or several, in any order; not changed.
 * @example const { data, counts } = toModelData(rows); fitModel(spec, data)
 */
export function toModelData(rows: readonly SalesRow[]): SalesModelData {
  const counts: RowCounts = {
    rows: rows.length, kept: 0, soldOut: 0, closed: 0, withoutPrice: 0, withoutTemperature: 0, partlySoldOut: 0, netReturns: 0,
  };
  const usable = rows.filter((row) => {
    const reason = reasonToLeaveOut(row);
    if (reason !== null) counts[reason]++;
    return reason === null;
  });

  const missing = usable.filter((row) => row.temperatureC === null).length;
  const leaveOutMissing = missing <= SHARE_WITHOUT_TEMPERATURE * usable.length;
  const kept = leaveOutMissing ? usable.filter((row) => row.temperatureC !== null) : usable;
  counts.withoutTemperature = usable.length - kept.length;
  counts.kept = kept.length;
  counts.partlySoldOut = kept.filter((row) => exposureOf(row) < 1).length;
  counts.netReturns = kept.filter((row) => row.units < 0).length;

  const units = Float64Array.from(kept, (row) => Math.max(0, row.units));
  return { data: { ...modelColumns(kept.map(cellOf)), units }, rows: kept, counts };
}

/**
 * The share of a week's open time on which the product could be bought: (open days - sold-out days) / open days, from 0 to 1.
 *
 * @returns 0 for a week sold out throughout, and for one in which the store did not open.
 * @example exposureOf({ openDays: 6, stockOutDays: 2 }) // 0.6667
 */
export function exposureOf({ openDays, stockOutDays }: Pick<SalesRow, "openDays" | "stockOutDays">): number {
  const open = openDays ?? DAYS_OPEN_UNLESS_SAID;
  const soldOut = Math.min(open, Math.max(0, stockOutDays ?? 0));
  return open > 0 ? (open - soldOut) / open : 0;
}

function reasonToLeaveOut(row: SalesRow): "closed" | "soldOut" | "withoutPrice" | null {
  if (row.openDays !== null && row.openDays <= 0) return "closed";
  if (exposureOf(row) === 0) return "soldOut";
  return row.price === null || row.price <= 0 ? "withoutPrice" : null;
}

function cellOf(row: SalesRow): ModelCell {
  return {
    store: row.store,
    week: row.week,
    price: row.price ?? Number.NaN,
    regularPrice: row.regularPrice,
    promotion: promotionOf(row),
    mechanic: row.mechanic === "price_cut" ? "none" : row.mechanic,
    deal: row.mechanic === "price_cut" ? 1 : 0,
    event: row.event ?? NO_EVENT,
    temperatureC: row.temperatureC,
    exposure: exposureOf(row),
  };
}
