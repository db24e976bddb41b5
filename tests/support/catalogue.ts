import request from "supertest";
import type { ExtractKind } from "@shared/contract/extract-kinds";
import { listCatalogueHistory, type CatalogueChange } from "@shared/contract/catalogue-history";
import { loadExtract } from "../../server/features/extracts";
import { checkedDirectly, read, type ExtractsApp } from "./extracts";

type Method = "post" | "put" | "delete";

/** A change of the catalogue as the data admin's script sends it. */
export function change({ app, dataAdmin }: ExtractsApp, method: Method, path: string, body?: object, headers: Record<string, string> = {}) {
  return request(app)[method](path).set("Authorization", dataAdmin).set(headers).send(body);
}

/** The newest changes on record of a kind, or of one code. */
export async function historyOf(test: ExtractsApp, query: string): Promise<CatalogueChange[]> {
  const { body } = await read(test, `/api/catalogue-history?${query}`).expect(200);
  return listCatalogueHistory.response!.parse(body).items;
}

/** Loads a file of the catalogue, and answers how many rows were new, changed and there already. */
export async function loadLines(test: ExtractsApp, kind: ExtractKind, ...lines: string[]) {
  const { id, state, failure } = await checkedDirectly(test, { kind, file: lines.join("\n") });
  if (state !== "checked") throw new Error(`The file is ${state}: ${JSON.stringify(failure)}`);
  return loadExtract(test.services, { extractId: id });
}
