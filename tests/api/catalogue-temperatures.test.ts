import request from "supertest";
import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import { addWeeks } from "@shared/calendar";
import { listTemperatures } from "@shared/contract/catalogue-temperatures";
import { change, historyOf, loadLines } from "../support/catalogue";
import { loadCatalogueDirectly, read, startExtractsApp, type ExtractsApp } from "../support/extracts";
import { signedInAs } from "../support/people";
import { expectProblem } from "../support/problems";

let test: ExtractsApp;
let planner: Awaited<ReturnType<typeof signedInAs>>;

beforeAll(async () => {
  test = await startExtractsApp({ worker: false });
  planner = await signedInAs(test.app, test.services, ["planner"]);
  await loadCatalogueDirectly(test);
});
afterAll(() => test.stop());
beforeEach(() => test.services.pool.query("delete from temperatures; delete from audit_entries where action like 'temperature.%'"));

const week = "2026-06-08";
const path = `/api/temperatures/region/coast/${week}`;
const weeksOf = async (place: string, first = week, last = week) =>
  listTemperatures.response!.parse((await read(test, `/api/temperatures/${place}?first=${first}&last=${last}`).expect(200)).body);

describe("a place's temperatures", () => {
  it("are told for each week asked for, known or not, with what the other years say is usual", async () => {
    const lastYear = [-1, 0, 1].map((weeks, at) => `${addWeeks("2025-06-09", weeks)},coast,${[14, 15, 19][at]}`);
    await loadLines(test, "temperatures", "week,region,temperature_c", ...lastYear, "2024-06-10,coast,11", `${week},coast,21.5`);
    const { items, firstKnown, lastKnown } = await weeksOf("region/coast", week, addWeeks(week, 1));
    expect([firstKnown, lastKnown]).toEqual(["2024-06-10", week]);
    expect(items[0]).toMatchObject({ week, temperatureC: 21.5, source: "region", lowC: 11, highC: 19, version: expect.any(String) });
    // The weights fall by a third a week from the time of year asked for.
    expect(items[0]?.normalC).toBeGreaterThan(13.5);
    expect(items[0]?.normalC).toBeLessThan(15.5);
    expect(items[1]).toMatchObject({ week: "2026-06-15", temperatureC: null, source: null, version: null });
  });

  it("have no normal where no other year is known", async () => {
    await loadLines(test, "temperatures", "week,region,temperature_c", `${week},coast,21.5`);
    expect((await weeksOf("region/coast")).items).toMatchObject([{ temperatureC: 21.5, normalC: null, lowC: null, highC: null }]);
  });

  it("of a store are its own where it has them, and its region's for the other weeks", async () => {
    await loadLines(test, "temperatures", "week,region,store,temperature_c", `${week},coast,,20`, `${addWeeks(week, 1)},coast,,22`, `${week},,S1,18.5`);
    const { items } = await weeksOf("store/S1", week, addWeeks(week, 1));
    expect(items.map(({ temperatureC, source, version }) => [temperatureC, source, version === null])).toEqual([[18.5, "store", false], [22, "region", true]]);
  });

  it("are refused for places that are none and weeks that are none of the chain's", async () => {
    expectProblem(await read(test, `/api/temperatures/region/island?first=${week}&last=${week}`), 404, "not-found");
    expectProblem(await read(test, `/api/temperatures/store/X9?first=${week}&last=${week}`), 404, "not-found");
    expectProblem(await read(test, `/api/temperatures/town/coast?first=${week}&last=${week}`), 404, "not-found");
    const errorsAt = async (first: string, last: string) => (await read(test, `/api/temperatures/region/coast?first=${first}&last=${last}`).expect(422)).body.errors;
    expect(await errorsAt("2026-06-09", "2026-06-15")).toEqual([
      { path: "first", message: "2026-06-09 is a Tuesday, but weeks begin on Monday: the week that holds it begins on 2026-06-08." },
    ]);
    expect(await errorsAt(week, addWeeks(week, -1))).toEqual([{ path: "last", message: "The last week lies before the first." }]);
    expect(await errorsAt(week, addWeeks(week, 530))).toEqual([{ path: "last", message: "At most 530 weeks are answered at once." }]);
    expect(await errorsAt("", week)).toMatchObject([{ path: "first" }]);
  });
});

describe("a week's temperature", () => {
  it("is entered, changed and removed, each with its trace", async () => {
    const { body } = await change(test, "put", path, { temperatureC: 17.5 }, { "If-None-Match": "*" }).expect(200);
    expect(body).toMatchObject({ week, temperatureC: 17.5, source: "region" });
    await change(test, "put", path, { temperatureC: -3 }, { "If-Match": `"${body.version}"` }).expect(200);
    expectProblem(await change(test, "put", path, { temperatureC: 4 }, { "If-Match": `"${body.version}"` }), 412, "changed-meanwhile");
    await change(test, "delete", path).expect(204);
    expectProblem(await change(test, "delete", path), 404, "not-found");
    expect((await historyOf(test, "kind=temperature&code=coast")).map((entry) => [entry.change, entry.before?.temperatureC, entry.after?.temperatureC])).toEqual([
      ["removed", -3, undefined], ["changed", 17.5, -3], ["added", undefined, 17.5],
    ]);
  });

  it("of a store stands beside its region's, and goes back to it", async () => {
    await change(test, "put", path, { temperatureC: 17.5 }).expect(200);
    await change(test, "put", `/api/temperatures/store/S1/${week}`, { temperatureC: 16 }).expect(200);
    await change(test, "delete", `/api/temperatures/store/S1/${week}`).expect(204);
    expect((await weeksOf("store/S1")).items).toMatchObject([{ temperatureC: 17.5, source: "region", version: null }]);
    expectProblem(await change(test, "delete", `/api/temperatures/store/S1/${week}`), 404, "not-found");
  });

  it("is one that a week can have, in a week of the chain's", async () => {
    const hot = await change(test, "put", path, { temperatureC: 61 });
    expectProblem(hot, 422, "invalid-request");
    expect(hot.body.errors).toEqual([{ path: "temperatureC", message: "No week has a mean above 60 °C." }]);
    const tuesday = await change(test, "put", "/api/temperatures/region/coast/2026-06-09", { temperatureC: 16 });
    expectProblem(tuesday, 422, "invalid-week");
    expect(tuesday.body.errors[0].path).toBe("week");
    expectProblem(await change(test, "put", `/api/temperatures/region/island/${week}`, { temperatureC: 16 }), 404, "not-found");
  });

  it("is for people who may write the catalogue; everyone signed in reads", async () => {
    for (const method of ["put", "delete"] as const) {
      expectProblem(await request(test.app)[method](path).send({ temperatureC: 16 }), 401, "not-signed-in");
      expectProblem(await planner[method](path).send({ temperatureC: 16 }), 403, "not-allowed");
    }
    expectProblem(await request(test.app).get(`/api/temperatures/region/coast?first=${week}&last=${week}`), 401, "not-signed-in");
    await planner.get(`/api/temperatures/region/coast?first=${week}&last=${week}`).expect(200);
  });
});
