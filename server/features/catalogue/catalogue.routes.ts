import * as contract from "@shared/contract/catalogue";
import { route, type Route } from "../../http/route";
import { presentProduct, presentStore } from "./catalogue.presenter";
import { listProducts, listStores } from "./catalogue.service";

const readStores = route(contract.listStores, async ({ em }) => {
  const stores = await listStores(em);
  return { items: stores.map(presentStore) };
});

const readProducts = route(contract.listProducts, async ({ em, query, now }) => {
  const products = await listProducts(em, { on: query.on, now });
  return { items: products.map(presentProduct) };
});

export const catalogueRoutes: readonly Route[] = [readStores, readProducts];
