import type { Day } from "@shared/calendar";
import type { ReaderContext } from "../kinds/kind";
import { checkNetSales, checkTradeDays, checkUnitCost, paidPrice } from "./sales-row-rules";

type ReadCells = {
  product: number | null; store: number | null; week: Day | null; openDays: string | null; mechanic: string | null;
} & Record<"units" | "netSales" | "regular" | "shelf" | "unitCost", string | null>;

const numberOf = (value: string | null) => (value === null ? null : Number(value));

/** Checks what the values of a row say together, and takes its price down. */
export function senseChecker({ row, codes: { storeDays }, notes }: ReaderContext) {
  const { prices } = notes;
  const [week, openDays] = [row.column("week"), row.column("open_days")];
  const [netSales, shelfPrice, unitCost] = [row.column("net_sales"), row.column("shelf_price"), row.column("unit_cost")];
  return (cells: ReadCells) => {
    const days = cells.store === null ? undefined : storeDays.get(cells.store);
    if (days && cells.week !== null) checkTradeDays({ week: cells.week, openDays: cells.openDays, days, columns: { week, openDays } });
    if (cells.units === null || cells.netSales === null) return;
    const money = {
      units: Number(cells.units), netSales: Number(cells.netSales), shelfPrice: numberOf(cells.shelf),
      regularPrice: numberOf(cells.regular), unitCost: numberOf(cells.unitCost), mechanic: cells.mechanic,
    };
    checkNetSales(netSales, money);
    checkUnitCost(unitCost, money);
    const price = money.shelfPrice ?? paidPrice(money);
    if (cells.product === null || cells.week === null || row.hasError) return;
    notes.addWeek(cells.week);
    const ofProduct = prices.of(cells.product);
    if (price === null || !ofProduct.add(price)) return;
    const column = money.shelfPrice === null ? netSales : shelfPrice;
    prices.remember({ line: row.line, column: column.name, value: column.shown });
  };
}
