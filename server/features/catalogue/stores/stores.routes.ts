import * as lists from "@shared/contract/catalogue";
import * as contract from "@shared/contract/catalogue-stores";
import { route, type Route } from "../../../http/route";
import { presentStore } from "../catalogue.presenter";
import { listStores } from "../catalogue.service";
import { tagged, writeOf } from "../changes/write-of";
import { changeStore, createStore, removeStore } from "./stores.service";

const list = route(lists.listStores, async ({ em }) => ({ items: (await listStores(em)).map(presentStore) }));

const create = route(contract.createStore, async (call) => {
  const store = await createStore(call.em, { store: call.body, write: writeOf(call) });
  call.response.location(`/api/stores/${encodeURIComponent(store.code)}`);
  return tagged(call, presentStore(store));
});

const put = route(contract.putStore, async (call) =>
  tagged(call, presentStore(await changeStore(call.em, { code: call.params.code, store: call.body, write: writeOf(call) }))));

const remove = route(contract.deleteStore, async (call) => {
  await removeStore(call.em, { code: call.params.code, write: writeOf(call) });
  return undefined;
});

export const storesRoutes: readonly Route[] = [list, create, put, remove];
