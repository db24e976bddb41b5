import type { Day } from "@shared/calendar";
import { gtinKey } from "../../catalogue";
import { copyText } from "../check/copy-text";
import { WeekReader } from "../check/day-columns";
import { isMistypedGtin, reportCheckDigit } from "../check/gtin-column";
import type { Column, Row } from "../check/row";
import { SeenKeys } from "../check/seen-keys";
import { senseChecker } from "../check/sales-sense";
import { checkSalesTogether } from "../check/sales-together.repository";
import { compareSales } from "../load/compare-sales.repository";
import { ensurePartitions, mergeSales } from "../load/sales-merge.repository";
import { salesStanding } from "../load/sales-standing.repository";
import type { KindDefinition, ReaderContext } from "./kind";
import { temperatureOf } from "./temperatures";

const mechanics = new Set(["none", "price_cut", "multi_buy", "coupon", "other"]);
const mostUnits = 1e9;
const daysOfAWeek = 7;

type Naming = Pick<ReaderContext, "codes" | "notes">;

function storeReader(column: Column, { codes: { storeIds }, notes }: Naming) {
  return (week: Day | null) => {
    const code = column.raw;
    if (code === "") return column.report("missing-value");
    const id = storeIds.get(code);
    if (id !== undefined) return id;
    notes.unknownStores.add(code, week);
    return column.report("unknown-store");
  };
}

/** By the chain's own code, or else by GTIN. */
function productReader(column: Column, { codes: { productIds, productIdsByGtin }, notes }: Naming) {
  return (week: Day | null) => {
    const code = column.raw;
    if (code === "") return column.report("missing-value");
    const id = productIds.get(code) ?? productIdsByGtin.get(gtinKey(code));
    if (id !== undefined) return id ?? column.report("ambiguous-product");
    if (isMistypedGtin(code)) return reportCheckDigit(column);
    notes.unknownProducts.add(code, week);
    return column.report("unknown-product");
  };
}

/** Units and net sales, and whether they go together. */
function sellingReader(row: Row) {
  const [units, netSales] = [row.column("units"), row.column("net_sales")];
  return () => {
    const selling = { units: units.quantity({ limit: mostUnits }), netSales: netSales.amount({ needed: true, negative: true }) };
    if (selling.units === null || selling.netSales === null) return selling;
    const [sold, paid] = [Number(selling.units), Number(selling.netSales)];
    if (sold < 0) units.report("net-returns");
    else if (sold === 0 && paid !== 0) netSales.report("sales-without-units");
    else if (sold > 0 && paid < 0) netSales.report("negative-net-sales");
    else if (sold > 0 && paid === 0) netSales.report("units-without-sales");
    return selling;
  };
}

function mechanicReader(column: Column) {
  return () => {
    const value = column.raw.toLowerCase();
    if (value === "") return "none";
    return mechanics.has(value) ? value : column.report("unknown-mechanic");
  };
}

function daysReader(row: Row) {
  const [open, soldOut] = [row.column("open_days"), row.column("stock_out_days")];
  return () => {
    const days = { open: open.days(), soldOut: soldOut.days() };
    if (days.soldOut !== null && Number(days.soldOut) > Number(days.open ?? daysOfAWeek)) soldOut.report("sold-out-too-long");
    return days;
  };
}

/** Watches for rows of the same product, store and week. */
function watchKeys({ codes, notes }: ReaderContext): SeenKeys {
  const above = (ids: ReadonlyMap<string, number>) => [...ids.values()].reduce((most, id) => Math.max(most, id), 0) + 1;
  return (notes.keys = new SeenKeys({ stores: above(codes.storeIds), products: above(codes.productIds) }));
}

/** Files of weekly sales, a row a product, store and week. */
export const salesKind: KindDefinition = {
  kind: "sales",
  staged: [
    { name: "product_id", type: "integer not null" },
    { name: "store_id", type: "integer not null" },
    { name: "week", type: "date not null" },
    { name: "units", type: "numeric(12,3) not null" },
    { name: "net_sales", type: "numeric(14,4) not null" },
    { name: "regular_price", type: "numeric(14,4)" },
    { name: "shelf_price", type: "numeric(14,4)" },
    { name: "feature", type: "boolean not null" },
    { name: "display", type: "boolean not null" },
    { name: "mechanic", type: "varchar(12) not null" },
    { name: "promotion_days", type: "smallint" },
    { name: "open_days", type: "smallint" },
    { name: "stock_out_days", type: "smallint" },
    { name: "unit_cost", type: "numeric(14,4)" },
    { name: "temperature_c", type: "double precision" },
    { name: "event", type: "varchar(64)" },
  ],
  key: ["product_id", "store_id", "week"],
  keyText: `concat_ws(', ', (select code from products where id = staged.product_id),
    (select code from stores where id = staged.store_id), staged.week)`,
  reader(context) {
    const { row, calendar, today } = context;
    const weeks = new WeekReader(calendar, today);
    const readStore = storeReader(row.column("store"), context);
    const readProduct = productReader(row.column("product"), context);
    const checkSense = senseChecker(context);
    const readSelling = sellingReader(row);
    const readMechanic = mechanicReader(row.column("mechanic"));
    const readDays = daysReader(row);
    const week = row.column("week");
    const [regularPrice, shelfPrice, cost] = [row.column("regular_price"), row.column("shelf_price"), row.column("unit_cost")];
    const [feature, display, promotionDays] = [row.column("feature"), row.column("display"), row.column("promotion_days")];
    const [temperature, event] = [row.column("temperature_c"), row.column("event")];
    const orNull = (value: string | null) => value ?? "\\N";
    const seen = watchKeys(context);
    return () => {
      const firstDay = weeks.readPast(week);
      const [product, store] = [readProduct(firstDay), readStore(firstDay)];
      const { units, netSales } = readSelling();
      const days = readDays();
      const [regular, shelf, unitCost, mechanic] = [regularPrice.price(), shelfPrice.price(), cost.amount(), readMechanic()];
      checkSense({ product, store, week: firstDay, units, netSales, regular, shelf, unitCost, mechanic, openDays: days.open });
      // Numbers, days and words of ours need no escaping, and a file has millions of them.
      const staged = [
        product, store, firstDay, units, netSales, orNull(regular), orNull(shelf),
        feature.flag(), display.flag(), mechanic, orNull(promotionDays.days()), orNull(days.open), orNull(days.soldOut),
        orNull(unitCost), orNull(temperatureOf(temperature)), copyText(event.text({ longest: 64 })),
      ].join("\t");
      if (!row.hasError && product !== null && store !== null && firstDay !== null) seen.add(product, store, firstDay);
      return staged;
    };
  },
  checkTogether: checkSalesTogether,
  weekColumn: "week",
  compare: compareSales,
  standing: salesStanding,
  prepareLoad: ensurePartitions,
  load: mergeSales,
};
