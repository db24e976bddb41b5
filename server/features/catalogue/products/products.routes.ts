import * as lists from "@shared/contract/catalogue";
import * as contract from "@shared/contract/catalogue-products";
import { notFound } from "../../../errors";
import { route, type Route } from "../../../http/route";
import { presentProduct } from "../catalogue.presenter";
import { listProducts, productToday } from "../catalogue.service";
import { tagged, writeOf } from "../changes/write-of";
import { listCategories, nameCategory } from "./categories.service";
import { presentCategory, presentTerms } from "./products.presenter";
import { changeProduct, createProduct, removeProduct } from "./products.service";
import { listTerms, putTerms, removeTerms } from "./terms.service";

const list = route(lists.listProducts, async ({ em, query, now }) => ({
  items: (await listProducts(em, { on: query.on, now })).map(presentProduct),
}));

const create = route(contract.createProduct, async (call) => {
  const { em, body, now } = call;
  await createProduct(em, { product: body, write: writeOf(call) });
  call.response.location(`/api/products/${encodeURIComponent(body.code)}`);
  return tagged(call, presentProduct(await productToday(em, { code: body.code, now })));
});

const put = route(contract.putProduct, async (call) => {
  const { em, params, body, now } = call;
  await changeProduct(em, { code: params.code, product: body, write: writeOf(call) });
  return tagged(call, presentProduct(await productToday(em, { code: params.code, now })));
});

const remove = route(contract.deleteProduct, async (call) => {
  await removeProduct(call.em, { code: call.params.code, write: writeOf(call) });
  return undefined;
});

const readTerms = route(contract.listTerms, async ({ em, params }) => ({ items: (await listTerms(em, params.code)).map(presentTerms) }));

const writeTerms = route(contract.putTerms, async (call) =>
  tagged(call, presentTerms(await putTerms(call.em, { ...call.params, terms: call.body, write: writeOf(call) }))));

const dropTerms = route(contract.deleteTerms, async (call) => {
  await removeTerms(call.em, { ...call.params, write: writeOf(call) });
  return undefined;
});

const readCategories = route(contract.listCategories, async ({ em }) => ({ items: (await listCategories(em)).map(presentCategory) }));

const putCategory = route(contract.putCategory, async (call) => {
  const { em, params, body } = call;
  await nameCategory(em, { code: params.code, name: body.name, write: writeOf(call) });
  const named = (await listCategories(em)).find(({ code }) => code === params.code);
  if (!named) throw notFound("category");
  return tagged(call, presentCategory(named));
});

export const productsRoutes: readonly Route[] = [list, create, put, remove, readTerms, writeTerms, dropTerms, readCategories, putCategory];
