export * from "./catalogue.entities";
export { catalogueRoutes } from "./catalogue.routes";
export { catalogueCodes, gtinKey, type CatalogueCodes } from "./catalogue-codes.repository";
export type { MergeCounts } from "./merge/merge-counts";
export { compareEvents, mergeEvents } from "./merge/merge-events.repository";
export { compareProducts, mergeProducts } from "./merge/merge-products.repository";
export { compareStores, mergeStores } from "./merge/merge-stores.repository";
export { compareTemperatures, mergeTemperatures } from "./merge/merge-temperatures.repository";
