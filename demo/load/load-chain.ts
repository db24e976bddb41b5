import { listProducts } from "@shared/contract/catalogue";
import type { ExtractKind } from "@shared/contract/extract-kinds";
import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import type { Services } from "../../server/services";
import { demoPassword, people } from "../chain/people";
import { generateDemo } from "../generate";
import { writeDemo } from "../write";
import { answerOf, signedIn, type ApiClient } from "./api-client";
import { saveExampleScenario } from "./example-scenario";
import { fitProducts } from "./fit-products";
import { loadFile } from "./load-extract";
import { createAccount, createChain } from "./people";

type Load = { services: Services; url: string; today: string; say: (line: string) => void };

/**
 * Loads the demo into a running application, each step as the person whose work it is: the data admin uploads and loads
 * the files, the category manager has models fitted, the planner saves a scenario. What is there already is left alone,
 * so that a load which was broken off can be run again.
 *
 * @param load.url address the application answers at
 * @param load.today day up to which there are sales
 */
export async function loadChain({ services, url, today, say }: Load): Promise<void> {
  const as = (email: string) => signedIn({ url, email, password: demoPassword });
  await createChain(services);
  for (const person of [people.data, people.planner, people.admin]) await createAccount(services, { person });

  const data = await as(people.data.email);
  const lastWeek = await loadFiles({ client: data, today, say });
  await createAccount(services, { person: people.manager, categories: await categoriesOf(data) });

  const fitted = await fitProducts(await as(people.manager.email));
  say(`Fitted the models of ${fitted} products.`);
  await saveExampleScenario(await as(people.planner.email), lastWeek);
  say("Saved an example scenario.");
}

const files: [kind: ExtractKind, name: string][] = [
  ["stores", "stores.csv"],
  ["products", "products.csv"],
  ["listings", "listings.csv"],
  ["funding", "funding.csv"],
  ["events", "events.csv"],
  ["temperatures", "temperatures.csv"],
  ["sales", "sales.csv.gz"],
];

/** @returns the last week of sales */
async function loadFiles(
  { client, today, say }: { client: ApiClient; today: string; say: (line: string) => void },
): Promise<string> {
  const folder = await mkdtemp(join(tmpdir(), "larkmoor-"));
  try {
    const demo = generateDemo({ today });
    await writeDemo({ demo, folder, gzipSales: true });
    for (const [kind, name] of files) {
      const extract = await loadFile(client, { path: join(folder, name), kind });
      say(`Loaded ${name}: ${extract.rows?.usable ?? 0} rows.`);
    }
    return demo.sales[demo.sales.length - 1].week;
  } finally {
    await rm(folder, { recursive: true });
  }
}

async function categoriesOf(client: ApiClient): Promise<string[]> {
  const { items } = answerOf(listProducts, await client.call({ method: "GET", path: "/api/products" }));
  return [...new Set(items.map(({ category }) => category))];
}
