import type { Express } from "express";
import { Readable } from "node:stream";
import request from "supertest";
import type { ExtractKind } from "@shared/contract/extract-kinds";
import type { Extract } from "@shared/contract/extracts";
import { ensureChain } from "../../server/features/chain";
import { checkExtract, loadExtract, receiveExtract } from "../../server/features/extracts";
import { hasEnded, waitForJob } from "./jobs";
import { bearerOf } from "./people";
import { startTestApp, type TestApp } from "./test-app";

/** The application with a worker, a chain and a data admin's token. */
export type ExtractsApp = TestApp & { dataAdmin: string; dataAdminId: string };

export const testToday = new Date("2026-06-15T09:00:00Z");

export async function startExtractsApp({ worker = true }: { worker?: boolean } = {}): Promise<ExtractsApp> {
  const test = await startTestApp({ worker, now: () => testToday });
  await ensureChain(test.services.orm.em.fork(), { name: "Test chain" });
  const dataAdmin = await bearerOf(test.app, test.services, ["data-admin"]);
  const [{ id }] = (await test.services.pool.query<{ id: string }>("select id from people")).rows;
  return { ...test, dataAdmin, dataAdminId: id };
}

export type Upload = { kind?: string; file: string | Buffer; name?: string };

/** Sends a file as a script does. */
export function upload({ app, dataAdmin }: { app: Express; dataAdmin: string }, { kind = "sales", file, name = "file.csv" }: Upload) {
  return request(app).post("/api/extracts").set("Authorization", dataAdmin).field("kind", kind)
    .attach("file", typeof file === "string" ? Buffer.from(file) : file, name);
}

/** Waits for the job that an answer of 202 names, and answers the extract as it then is. */
export async function afterJob(test: ExtractsApp, answer: request.Response): Promise<Extract> {
  const jobId = String(answer.headers.location).split("/").at(-1) ?? "";
  const job = await waitForJob(test.services, jobId, (row) => hasEnded(row) && !row.cleanupPending);
  const { body } = await read(test, String(job.subject)).expect(200);
  return body as Extract;
}

export function read({ app, dataAdmin }: { app: Express; dataAdmin: string }, path: string) {
  return request(app).get(path).set("Authorization", dataAdmin);
}

export function act({ app, dataAdmin }: { app: Express; dataAdmin: string }, path: string) {
  return request(app).post(path).set("Authorization", dataAdmin);
}

/** Uploads a file and waits until it is checked. */
export async function checked(test: ExtractsApp, file: Upload): Promise<Extract> {
  return afterJob(test, await upload(test, file).expect(202));
}

/** The same without HTTP and queue, in a fraction of the time. */
export async function checkedDirectly({ services, dataAdminId }: ExtractsApp, { kind = "sales", file, name = "file.csv" }: Upload & { kind?: ExtractKind }) {
  const body = Readable.from([Buffer.from(file)]);
  const { id } = await receiveExtract(services, { body, fileName: name, kind, personId: dataAdminId, inBackground: false });
  return checkExtract(services, { extractId: id });
}

/** Uploads a file, has it checked, and loads it; throws where either does not come about. */
export async function loaded(test: ExtractsApp, file: Upload): Promise<Extract> {
  const { id, state, failure } = await checked(test, file);
  if (state !== "checked") throw new Error(`The file is ${state}: ${JSON.stringify(failure)}`);
  return afterJob(test, await act(test, `/api/extracts/${id}/load`).send({ secondLook: true }).expect(202));
}

export const storesFile = [
  "store,name,region,opened,closed",
  "S1,Harbour Street,coast,2015-03-02,",
  "S2,Mill Lane,coast,,",
  "S3,Church Hill,coast,,",
  "S4,High Moor,moor,,",
].join("\n");

export const productsFile = [
  "product,name,gtin,brand,category,sold_by_weight,valid_from,unit_cost,regular_price,tax_rate",
  "P1,Oat bar,2000000000015,Larkfield,snacks,0,2025-01-01,0.80,1.79,0.21",
  "P1,Oat bar,2000000000015,Larkfield,snacks,0,2026-05-01,0.90,1.99,0.21",
  "P2,Loose apples,,,fruit,1,2025-01-01,,2.49,0.09",
].join("\n");

/** Loads the four stores and two products that the tests' sales name. */
export async function loadCatalogue(test: ExtractsApp): Promise<void> {
  await loaded(test, { kind: "stores" satisfies ExtractKind, file: storesFile });
  await loaded(test, { kind: "products" satisfies ExtractKind, file: productsFile });
}

/** The same without HTTP and queue. */
export async function loadCatalogueDirectly(test: ExtractsApp): Promise<void> {
  for (const [kind, file] of [["stores", storesFile], ["products", productsFile]] as const) {
    const { id } = await checkedDirectly(test, { kind, file });
    await loadExtract(test.services, { extractId: id });
  }
}

export const salesHeader = "week,store,product,units,net_sales,regular_price,shelf_price,feature,display,mechanic";

/** A sales file of our header and these rows. */
export const salesFile = (...rows: string[]) => [salesHeader, ...rows].join("\n");

export type StoredSale = Record<"week" | "store" | "product" | "units" | "price" | "source" | "file", string | null>;

/** Every sales row in the database in the words of the file, with the file it came from. */
export async function storedSales({ services }: TestApp): Promise<StoredSale[]> {
  const { rows } = await services.pool.query<StoredSale>(`
    select sales.week, store.code as store, product.code as product, sales.units::float8::text as units,
      sales.price::float8::text as price, sales.price_source as source, extract.file_name as file
    from weekly_sales sales join stores store on store.id = sales.store_id join products product on product.id = sales.product_id
    join extracts extract on extract.id = sales.extract_id
    order by sales.week, store.code, product.code`);
  return rows;
}
