import type { ExtractKind } from "./extract-kinds";

/** A column of our own CSV. */
export type ExtractColumn = {
  name: string;
  /** Without it in the header the whole file cannot be used. */
  needed: boolean;
  /** What stands in it, for people who make the file. */
  holds: string;
};

const needed = (name: string, holds: string): ExtractColumn => ({ name, needed: true, holds });
const optional = (name: string, holds: string): ExtractColumn => ({ name, needed: false, holds });

/** The columns that each kind of file has; the server checks headers by it, and the client shows it. */
export const extractColumns: Record<ExtractKind, readonly ExtractColumn[]> = {
  sales: [
    needed("week", "First day of the week, YYYY-MM-DD; with ISO weeks also 2026-W24"),
    needed("store", "The chain's code of the store"),
    needed("product", "The chain's code of the product, or its GTIN"),
    needed("units", "Units sold less units returned, up to 3 decimals"),
    needed("net_sales", "What customers paid for them"),
    needed("regular_price", "Price of one unit without promotion; may be empty"),
    optional("shelf_price", "Price of one unit on the shelf that week"),
    optional("feature", "1 when in the leaflet or an advert, else 0"),
    optional("display", "1 when placed a second time in the store, else 0"),
    optional("mechanic", "none, price_cut, multi_buy, coupon or other"),
    optional("promotion_days", "Days of the week on promotion, 0 to 7"),
    optional("open_days", "Days of the week the store was open, 0 to 7"),
    optional("stock_out_days", "Open days on which it was sold out"),
    optional("unit_cost", "Cost of one unit to the chain, net of tax"),
    optional("temperature_c", "Mean temperature of the week in degrees Celsius"),
    optional("event", "Code of the chain's event in that week"),
  ],
  stores: [
    needed("store", "The chain's code of the store"),
    needed("name", "Its name"),
    needed("region", "Its region"),
    optional("opened", "First day of trade, YYYY-MM-DD"),
    optional("closed", "Last day of trade, YYYY-MM-DD"),
  ],
  products: [
    needed("product", "The chain's code of the product"),
    needed("name", "Its name"),
    optional("gtin", "Its GTIN: 8, 12, 13 or 14 digits"),
    optional("brand", "Its brand"),
    needed("category", "Its category"),
    optional("sold_by_weight", "1 when sold by weight, else 0"),
    optional("valid_from", "First day on which this row's cost, price and tax hold; empty: from the beginning"),
    optional("unit_cost", "Cost of one unit to the chain, net of tax"),
    optional("regular_price", "Price of one unit without promotion"),
    optional("tax_rate", "Tax as a share of the net price: 0.21 for 21 %"),
  ],
  listings: [
    needed("product", "The chain's code of the product, or its GTIN"),
    needed("store", "The chain's code of the store"),
    needed("first_day", "First day on which the store has it, YYYY-MM-DD"),
    optional("last_day", "Last day, YYYY-MM-DD; empty while it goes on"),
  ],
  funding: [
    needed("product", "The chain's code of the product, or its GTIN"),
    needed("first_day", "First day of the supplier's contribution, YYYY-MM-DD"),
    needed("last_day", "Last day, YYYY-MM-DD"),
    optional("per_unit", "Contribution to each unit sold, net of tax"),
    optional("lump_sum", "Contribution however many are sold, net of tax"),
  ],
  events: [
    needed("event", "The chain's code of the event"),
    needed("name", "Its name"),
    needed("first_day", "First day, YYYY-MM-DD"),
    needed("last_day", "Last day, YYYY-MM-DD"),
    optional("region", "Region it is held in; empty: all regions"),
  ],
  temperatures: [
    needed("week", "First day of the week, YYYY-MM-DD"),
    optional("region", "Region it was measured for; give this or store"),
    optional("store", "Code of the store it was measured for; give this or region"),
    needed("temperature_c", "Mean of the week in degrees Celsius"),
  ],
};
