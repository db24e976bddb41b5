import { z } from "zod";
import { storeSchema } from "./catalogue";
import { regionSchema, textSchema } from "./catalogue-values";
import { codeSchema, daySchema } from "./common";
import { defineEndpoint } from "./endpoint";

const described = z.object({
  name: textSchema(120),
  region: regionSchema,
  /** First day of trade, where the chain says it. */
  opened: daySchema.nullable().default(null),
  /** Last day of trade. A store that has sold is closed, never removed. */
  closed: daySchema.nullable().default(null),
});
type Days = { opened: string | null; closed: string | null };
const daysInOrder = ({ opened, closed }: Days) => opened === null || closed === null || closed >= opened;
const told = { path: ["closed"], message: "The last day of trade lies before the first." };

export const newStoreSchema = described.extend({ code: codeSchema }).refine(daysInOrder, told);
export const changedStoreSchema = described.refine(daysInOrder, told);

const params = z.object({ code: codeSchema });

export const createStore = defineEndpoint({
  method: "POST", path: "/api/stores", summary: "Enter a store", permission: "catalogue:write", body: newStoreSchema, response: storeSchema, status: 201,
});
export const putStore = defineEndpoint({
  method: "PUT", path: "/api/stores/:code", summary: "Change a store; a closing day closes it", permission: "catalogue:write",
  params, body: changedStoreSchema, response: storeSchema,
});
export const deleteStore = defineEndpoint({
  method: "DELETE", path: "/api/stores/:code", summary: "Remove a store that nothing refers to", permission: "catalogue:write", params,
});
export const exportStores = defineEndpoint({
  method: "GET", path: "/api/stores.csv", summary: "All stores as a file that can be uploaded again", permission: "read", produces: "text/csv",
});
