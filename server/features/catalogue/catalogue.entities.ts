import { defineEntity, p, type InferEntity } from "@mikro-orm/core";

export const CategoryEntity = defineEntity({
  name: "Category",
  tableName: "categories",
  properties: {
    id: p.integer().primary().autoincrement(),
    code: p.string().length(64).unique(),
    name: p.string().length(120),
  },
});
export type Category = InferEntity<typeof CategoryEntity>;

/** Small integer keys keep tens of millions of sales rows narrow; people and files use the code. */
export const StoreEntity = defineEntity({
  name: "Store",
  tableName: "stores",
  properties: {
    id: p.integer().primary().autoincrement(),
    code: p.string().length(64).unique(),
    name: p.string().length(120),
    region: p.string().length(80),
    opened: p.date().nullable(),
    closed: p.date().nullable(),
  },
});
export type Store = InferEntity<typeof StoreEntity>;

export const ProductEntity = defineEntity({
  name: "Product",
  tableName: "products",
  properties: {
    id: p.integer().primary().autoincrement(),
    code: p.string().length(64).unique(),
    name: p.string().length(160),
    gtin: p.string().length(14).nullable(),
    brand: p.string().length(120).nullable(),
    category: () => p.manyToOne(CategoryEntity),
    soldByWeight: p.boolean().default(false),
    /** The product this one took the place of; its units times the ratio continue that product's history. */
    replaces: () => p.manyToOne(ProductEntity).nullable(),
    replacesSizeRatio: p.decimal("number").precision(10).scale(4).nullable(),
  },
});
export type Product = InferEntity<typeof ProductEntity>;

/** Cost, regular price and tax from a day on, until the next such row. */
export const ProductTermsEntity = defineEntity({
  name: "ProductTerms",
  tableName: "product_terms",
  properties: {
    product: () => p.manyToOne(ProductEntity).primary().deleteRule("cascade"),
    validFrom: p.date().primary(),
    unitCost: p.decimal("number").precision(14).scale(4).nullable(),
    regularPrice: p.decimal("number").precision(14).scale(4).nullable(),
    taxRate: p.decimal("number").precision(6).scale(4).default(0),
  },
});
export type ProductTerms = InferEntity<typeof ProductTermsEntity>;

/** A supplier's contribution over some days. */
export const ProductFundingEntity = defineEntity({
  name: "ProductFunding",
  tableName: "product_funding",
  uniques: [{ properties: ["product", "firstDay"] }],
  properties: {
    id: p.integer().primary().autoincrement(),
    product: () => p.manyToOne(ProductEntity).deleteRule("cascade"),
    firstDay: p.date(),
    lastDay: p.date(),
    perUnit: p.decimal("number").precision(14).scale(4).default(0),
    lumpSum: p.decimal("number").precision(14).scale(4).default(0),
  },
});
export type ProductFunding = InferEntity<typeof ProductFundingEntity>;

/** Days on which a store lists a product; missing rows mean something only inside them. */
export const ListingEntity = defineEntity({
  name: "Listing",
  tableName: "listings",
  indexes: [{ properties: ["store"] }],
  properties: {
    product: () => p.manyToOne(ProductEntity).primary().deleteRule("cascade"),
    store: () => p.manyToOne(StoreEntity).primary().deleteRule("cascade"),
    firstDay: p.date().primary(),
    lastDay: p.date().nullable(),
  },
});
export type Listing = InferEntity<typeof ListingEntity>;

/** One row per occurrence: a moving feast has a row a year under the same code. */
export const EventEntity = defineEntity({
  name: "Event",
  tableName: "events",
  uniques: [{ properties: ["code", "firstDay", "region"] }],
  properties: {
    id: p.integer().primary().autoincrement(),
    code: p.string().length(64),
    name: p.string().length(120),
    firstDay: p.date(),
    lastDay: p.date(),
    /** Empty for every region. */
    region: p.string().length(80).default(""),
  },
});
export type Event = InferEntity<typeof EventEntity>;

/** Weekly mean in degrees Celsius, by region or for one store; a store's own goes before its region's. */
export const TemperatureEntity = defineEntity({
  name: "Temperature",
  tableName: "temperatures",
  uniques: [{ properties: ["week", "region", "storeCode"] }],
  properties: {
    id: p.integer().primary().autoincrement(),
    week: p.date(),
    /** Empty where the row is for one store. */
    region: p.string().length(80).default(""),
    /** Empty where the row is for a region. */
    storeCode: p.string().length(64).default(""),
    temperatureC: p.double().$type<number>(),
  },
});
export type Temperature = InferEntity<typeof TemperatureEntity>;
