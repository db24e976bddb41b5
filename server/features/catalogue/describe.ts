import type { Values } from "./changes/record-change";
import type { Category, Event, Listing, Product, ProductFunding, ProductTerms, Store, Temperature } from "./catalogue.entities";

/*
 * What each thing consists of, as the history keeps it and versions are made of it. Files write the same by SQL (see
 * `merge/`), under the same names.
 */

export const storeValues = ({ name, region, opened, closed }: Store): Values => ({ name, region, opened: opened ?? null, closed: closed ?? null });

/** Of a product with its category and the one it replaces. */
export const productValues = ({ name, gtin, brand, category, soldByWeight, replaces, replacesSizeRatio }: Product): Values => ({
  name, gtin: gtin ?? null, brand: brand ?? null, category: category.code, soldByWeight, replaces: replaces?.code ?? null, replacesSizeRatio: replacesSizeRatio ?? null,
});

export const termsValues = ({ validFrom, unitCost, regularPrice, taxRate }: ProductTerms): Values => ({
  validFrom, unitCost: unitCost ?? null, regularPrice: regularPrice ?? null, taxRate,
});

export const categoryValues = ({ name }: Category): Values => ({ name });

/** Of a listing with its store. */
export const listingValues = ({ store, firstDay, lastDay }: Listing): Values => ({ store: store.code, firstDay, lastDay: lastDay ?? null });

export const fundingValues = ({ firstDay, lastDay, perUnit, lumpSum }: ProductFunding): Values => ({ firstDay, lastDay, perUnit, lumpSum });

export const eventValues = ({ name, firstDay, lastDay, region }: Event): Values => ({ name, firstDay, lastDay, region: region === "" ? null : region });

export const temperatureValues = ({ week, region, storeCode, temperatureC }: Temperature): Values => ({
  week, region: region === "" ? null : region, store: storeCode === "" ? null : storeCode, temperatureC,
});
