import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { standingOf } from "../../server/features/extracts/loaded-weeks";
import { act, afterJob, loadCatalogueDirectly, loaded, read, salesFile, startExtractsApp, type ExtractsApp } from "../support/extracts";
import { bearerOf } from "../support/people";

let test: ExtractsApp;

beforeAll(async () => {
  test = await startExtractsApp();
  await loadCatalogueDirectly(test);
});
afterAll(() => test.stop());

const sale = (week: string) => `${week},S1,P1,1,1.79,1.79,,0,0,none`;
const nothing = { first: null, last: null, missing: [], expected: null, overdue: 0 };
const standing = async () => (await read(test, "/api/loaded-weeks").expect(200)).body;

describe("GET /api/loaded-weeks", () => {
  it("names what is loaded, missing and expected, and follows loads and withdrawals", async () => {
    expect(await standing()).toEqual(nothing);
    await loaded(test, { file: salesFile(sale("2026-04-27"), sale("2026-05-11")) });
    const later = await loaded(test, { file: salesFile(sale("2026-06-01")), name: "later.csv" });
    // Today is Monday 15 June 2026: the week of 8 June has ended.
    expect(await standing()).toEqual({
      first: "2026-04-27",
      last: "2026-06-01",
      missing: ["2026-05-04", "2026-05-18", "2026-05-25"],
      expected: "2026-06-08",
      overdue: 1,
    });
    await afterJob(test, await act(test, `/api/extracts/${later.id}/withdraw`).expect(202));
    expect(await standing()).toMatchObject({ last: "2026-05-11", missing: ["2026-05-04"], expected: "2026-05-18", overdue: 4 });
  });

  it("is read by who is signed in and may read", async () => {
    await request(test.app).get("/api/loaded-weeks").expect(401);
    const writer = await bearerOf(test.app, test.services, ["data-admin", "planner"], ["extracts:write"]);
    await request(test.app).get("/api/loaded-weeks").set("Authorization", writer).expect(403);
    const planner = await bearerOf(test.app, test.services, ["planner"]);
    await request(test.app).get("/api/loaded-weeks").set("Authorization", planner).expect(200);
  });
});

describe("where the weeks stand", () => {
  it("goes by the chain's first day of the week, and takes a day for the week that holds it", () => {
    expect(standingOf(["2026-06-04", "2026-05-25"], { today: "2026-06-17", weekStart: 4 })).toEqual({
      first: "2026-05-21",
      last: "2026-06-04",
      missing: ["2026-05-28"],
      expected: "2026-06-11",
      overdue: 0,
    });
  });

  it("has nothing overdue where a week is loaded that has not ended, and no end of weeks for one given far back", () => {
    expect(standingOf(["2026-06-15"], { today: "2026-06-15", weekStart: 1 })).toMatchObject({ expected: "2026-06-22", overdue: 0 });
    expect(standingOf(["1970-01-05", "2026-06-01"], { today: "2026-06-15", weekStart: 1 }).missing).toHaveLength(1043);
    expect(standingOf([], { today: "2026-06-15", weekStart: 1 })).toEqual(nothing);
  });
});
