import { addWeeks, weeksBetween, type Day } from "@shared/calendar";
import { listScenarios, type ScenarioDraft } from "@shared/contract/scenarios";
import { stores } from "../chain/stores";
import { answerOf, type ApiClient } from "./api-client";

const name = "Midsummer lemonade";
const product = "P101";
const storeCount = 6;
const weekCount = 6;

/** A cut from the regular price to 1.49 with a feature, for six weeks in six stores on the coast. */
export function exampleScenario(lastWeek: Day): ScenarioDraft {
  const first = addWeeks(lastWeek, 2);
  const weeks = { first, last: addWeeks(first, weekCount - 1) };
  const onTheCoast = stores.filter(({ region }) => region === "Coast").slice(0, storeCount).map(({ code }) => code);
  const cells = onTheCoast.flatMap((store) =>
    weeksBetween(weeks.first, weeks.last).map((week) => ({ store, week, price: 1.49, promotion: "feature" as const })),
  );
  return { name, product, stores: onTheCoast, weeks, cells, fixedCost: 300 };
}

/** Saves the example scenario, unless the product has one of that name. */
export async function saveExampleScenario(client: ApiClient, lastWeek: Day): Promise<void> {
  const answer = await client.call({ method: "GET", path: `/api/scenarios?product=${product}` });
  const saved = answerOf(listScenarios, answer);
  if (saved.items.some((scenario) => scenario.name === name)) return;
  await client.call({ method: "POST", path: "/api/scenarios", json: exampleScenario(lastWeek) });
}
