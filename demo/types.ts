export type Region = "Coast" | "Town" | "Moor";
export type PromotionLevel = "none" | "feature" | "display" | "both";

/** A row of `stores.csv`; days are written 2024-06-03, `null` means not (yet). */
export type StoreRow = { store: string; name: string; region: Region; opened: string; closed: string | null };

/** A row of `products.csv`: the product, and one of its price terms. Prices include tax, costs do not. */
export type ProductRow = {
  product: string;
  name: string;
  gtin: string;
  brand: string;
  category: string;
  soldByWeight: boolean;
  validFrom: string;
  unitCost: number;
  regularPrice: number;
  taxRate: number;
};

/** A row of `listings.csv`: the days on which a store has a product; `lastDay` is null while it goes on. */
export type ListingRow = { product: string; store: string; firstDay: string; lastDay: string | null };

/** A row of `funding.csv`: what a supplier gives for some days, net of tax. */
export type FundingRow = { product: string; firstDay: string; lastDay: string; perUnit: number; lumpSum: number };

/** A row of `events.csv`; `region` is null for an event of the whole chain. */
export type EventRow = { event: string; name: string; firstDay: string; lastDay: string; region: Region | null };

/** A row of `temperatures.csv`: the week's mean temperature in a region, in degrees Celsius. */
export type TemperatureRow = { week: string; region: Region; temperatureC: number };

/** A row of `sales.csv`: what one store sold of one product in one week. */
export type SalesRow = {
  week: string;
  store: string;
  product: string;
  units: number;
  netSales: number;
  regularPrice: number;
  shelfPrice: number;
  feature: boolean;
  display: boolean;
  mechanic: "none" | "price_cut";
};

/** The chain's files, as rows. */
export type Demo = {
  stores: StoreRow[];
  products: ProductRow[];
  listings: ListingRow[];
  funding: FundingRow[];
  events: EventRow[];
  temperatures: TemperatureRow[];
  sales: SalesRow[];
};
