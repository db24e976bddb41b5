import request from "supertest";
import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import { AuditEntryEntity } from "../../server/features/accounts";
import { ChainEntity, defaultChain, ensureChain } from "../../server/features/chain";
import { signedInAs } from "../support/people";
import { expectProblem } from "../support/problems";
import { startTestApp, type TestApp } from "../support/test-app";

type Agent = Awaited<ReturnType<typeof signedInAs>>;
let test: TestApp;
let administrator: Agent;
let planner: Agent;

beforeAll(async () => {
  test = await startTestApp();
  administrator = await signedInAs(test.app, test.services, ["administrator"]);
  planner = await signedInAs(test.app, test.services, ["planner"]);
});
afterAll(() => test.stop());
beforeEach(async () => {
  const em = test.services.orm.em.fork();
  await em.nativeDelete(ChainEntity, {});
  await ensureChain(em);
});

describe("the chain's settings", () => {
  it("are read by everyone who is signed in", async () => {
    const { body } = await planner.get("/api/chain").expect(200);
    expect(body).toEqual({
      name: "My chain",
      currency: "EUR",
      locale: "en-GB",
      timeZone: "Europe/London",
      calendar: "iso",
      weekStart: 1,
      temperatureUnit: "celsius",
      intervalLevel: 0.8,
      uploadLimitBytes: 2_147_483_648,
      secondLookShare: 0.25,
      salesDueDay: 1,
      salesDueHour: 12,
    });
    expectProblem(await request(test.app).get("/api/chain"), 401, "not-signed-in");
  });

  it("are not there before the chain was set up, and setting up again changes nothing", async () => {
    const em = test.services.orm.em.fork();
    await administrator.put("/api/chain").send({ name: "Larkmoor" }).expect(200);
    expect(await ensureChain(em, { name: "Another" })).toMatchObject({ name: "Larkmoor" });
    await em.nativeDelete(ChainEntity, {});
    expectProblem(await planner.get("/api/chain"), 404, "not-found");
  });

  it("are changed by an administrator, one or all, and the audit trail says from what to what", async () => {
    const { body } = await administrator
      .put("/api/chain")
      .send({ calendar: "4-5-4", weekStart: 0, timeZone: "America/New_York", currency: "EUR" })
      .expect(200);
    expect(body).toEqual({ ...defaultChain, calendar: "4-5-4", weekStart: 0, timeZone: "America/New_York" });
    expect((await planner.get("/api/chain")).body).toEqual(body);
    const em = test.services.orm.em.fork();
    const entries = await em.find(
      AuditEntryEntity,
      { action: "settings.changed" },
      { orderBy: { id: "desc" }, limit: 1 },
    );
    expect(entries[0]?.detail).toEqual({
      calendar: { from: "iso", to: "4-5-4" },
      weekStart: { from: 1, to: 0 },
      timeZone: { from: "Europe/London", to: "America/New_York" },
    });
    const count = await em.count(AuditEntryEntity, { action: "settings.changed" });
    await administrator.put("/api/chain").send(body).expect(200);
    expect(await em.count(AuditEntryEntity, { action: "settings.changed" })).toBe(count);
  });

  it("let ISO weeks begin on any day", async () => {
    const { body } = await administrator.put("/api/chain").send({ weekStart: 4 }).expect(200);
    expect(body).toEqual({ ...defaultChain, weekStart: 4 });
  });

  it("are refused to everyone else", async () => {
    expectProblem(await planner.put("/api/chain").send({ name: "Mine" }), 403, "not-allowed");
    expectProblem(await request(test.app).put("/api/chain").send({ name: "Mine" }), 401, "not-signed-in");
  });

  it.each([
    ["a time zone that does not exist", { timeZone: "Mars/Olympus" }, "timeZone"],
    ["a locale that is no language tag", { locale: "en_GB!" }, "locale"],
    ["a locale that nothing can be written by", { locale: "xx-XX" }, "locale"],
    ["a currency that does not exist", { currency: "XQQ" }, "currency"],
    ["4-5-4 weeks that do not begin on Sunday", { calendar: "4-5-4" }, "weekStart"],
  ])("do not take %s", async (_what, settings, path) => {
    const response = await administrator.put("/api/chain").send(settings);
    expectProblem(response, 422, "invalid-settings");
    expect(response.body.errors).toEqual([{ path, message: response.body.detail }]);
    expect((await administrator.get("/api/chain")).body).toEqual(defaultChain);
  });

  it.each([
    [{ currency: "eur" }],
    [{ weekStart: 7 }],
    [{ intervalLevel: 1 }],
    [{ uploadLimitBytes: 0 }],
    [{ secondLookShare: 1.1 }],
    [{ salesDueDay: 7 }],
    [{ salesDueHour: 24 }],
    [{ name: "" }],
    [{ calendar: "weekly" }],
    [{ temperatureUnit: "kelvin" }],
  ])("do not take %j", async (settings) => {
    expectProblem(await administrator.put("/api/chain").send(settings), 422, "invalid-request");
  });
});
