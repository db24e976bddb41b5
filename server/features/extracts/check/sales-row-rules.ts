import { dayNumber, lastDayOfWeek, type Day } from "@shared/calendar";
import type { Column } from "./row";

/** Share by which net sales may miss units times shelf price: goods handed back, rounding, a price changed within the week. */
const mostOff = 0.2;
/** Nobody pays more than the regular price; so much is left for rounding. */
const mostAboveRegular = 1.05;
/** Products and quotients of decimals are not exact: what stands just at a limit has not passed it. */
const slack = 1e-6;

const money = (amount: number) => amount.toFixed(2);

/** What a row says of money, as numbers; null where it does not, or cannot be read. */
export type RowMoney = {
  units: number; netSales: number; shelfPrice: number | null; regularPrice: number | null; unitCost: number | null; mechanic: string | null;
};

/** What one unit was paid with, or null where nothing was sold for money. */
export function paidPrice({ units, netSales }: Pick<RowMoney, "units" | "netSales">): number | null {
  return units > 0 && netSales > 0 ? netSales / units : null;
}

/** Whether net sales go with units and prices. Multi-buys and coupons lower what is paid without lowering the shelf price. */
export function checkNetSales(column: Column, row: RowMoney): void {
  const { units, netSales, shelfPrice, regularPrice, mechanic } = row;
  if (units <= 0 || netSales <= 0) return;
  const atShelf = shelfPrice === null ? null : units * shelfPrice;
  if (atShelf !== null && mechanic !== "multi_buy" && mechanic !== "coupon" && Math.abs(netSales - atShelf) > mostOff * atShelf + slack) {
    column.report("net-sales-off", { reason: `${column.raw} was paid, but ${units} units at the shelf price of ${shelfPrice} come to ${money(atShelf)}` });
  } else if (regularPrice !== null && netSales > units * regularPrice * mostAboveRegular + slack) {
    column.report("net-sales-off", { reason: `${column.raw} was paid, but ${units} units at the regular price of ${regularPrice} come to ${money(units * regularPrice)} only` });
  }
}

/** Whether a unit cost more than was paid for it. Costs are net of tax and prices include it, so this is on the safe side. */
export function checkUnitCost(column: Column, row: RowMoney): void {
  const paid = paidPrice(row);
  if (row.unitCost === null || paid === null || row.unitCost <= paid + slack) return;
  column.report("cost-above-price", { reason: `One unit cost ${column.raw}, and ${money(paid)} was paid for it` });
}

/** First and last day of a store's trade, as far as they are known. */
type StoreDays = { opened: Day | null; closed: Day | null };

type TradeDays = { week: Day; openDays: string | null; days: StoreDays; columns: { week: Column; openDays: Column } };

/** Whether the store was open in the week at all, and where only partly, whether the row knows it. */
export function checkTradeDays({ week, openDays, days: { opened, closed }, columns }: TradeDays): void {
  const last = lastDayOfWeek(week);
  if (opened !== null && last < opened) {
    columns.week.report("before-opening", { reason: `The store opened on ${opened}, after this week` });
  } else if (closed !== null && closed < week) {
    columns.week.report("after-closing", { reason: `The store closed for good on ${closed}, before this week` });
  } else {
    const open = dayNumber(closed !== null && closed < last ? closed : last) - dayNumber(opened !== null && opened > week ? opened : week) + 1;
    if (open === 7 || (openDays !== null && Number(openDays) <= open)) return;
    const why = opened !== null && opened > week ? `opened on ${opened}` : `closed for good on ${closed ?? last}`;
    const column = openDays === null ? columns.week : columns.openDays;
    column.report("partly-open", { reason: `The store ${why}, so it was open on at most ${open} ${open === 1 ? "day" : "days"} of this week` });
  }
}
