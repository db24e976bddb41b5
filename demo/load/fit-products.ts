import { listProducts } from "@shared/contract/catalogue";
import { listModels } from "@shared/contract/drivers";
import { answerOf, type ApiClient } from "./api-client";

/**
 * Fits a model of every product that has none in use, in all its stores; a product's first model is used at once.
 *
 * @returns how many models were fitted
 */
export async function fitProducts(client: ApiClient): Promise<number> {
  const { items } = answerOf(listProducts, await client.call({ method: "GET", path: "/api/products" }));
  const jobs: string[] = [];
  for (const { code } of items) {
    if (await hasModelInUse(client, code)) continue;
    const { location } = await client.call({ method: "POST", path: "/api/models", json: { product: code } });
    if (location === null) throw new Error(`The model of ${code} is being fitted, but no job was named.`);
    jobs.push(location.slice(location.lastIndexOf("/") + 1));
  }
  await Promise.all(jobs.map((jobId) => client.finished(jobId)));
  return jobs.length;
}

async function hasModelInUse(client: ApiClient, product: string): Promise<boolean> {
  const path = `/api/models?product=${encodeURIComponent(product)}&state=in-use`;
  return answerOf(listModels, await client.call({ method: "GET", path })).items.length > 0;
}
