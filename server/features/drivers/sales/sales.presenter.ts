import type { SalesWeek } from "@shared/contract/drivers";
import { promotionOf } from "@shared/planning/sales-row";
import type { StoredSalesRow } from "./sales.repository";

/** A store-week as the model reads it. */
export function presentSalesWeek(row: StoredSalesRow): SalesWeek {
  return {
    week: row.week,
    units: row.units,
    netSales: row.netSales,
    price: row.price,
    priceSource: row.priceSource,
    regularPrice: row.regularPrice,
    promotion: promotionOf(row),
    mechanic: row.mechanic,
    temperatureC: row.temperatureC,
    event: row.event,
    openDays: row.openDays,
    stockOutDays: row.stockOutDays,
  };
}
