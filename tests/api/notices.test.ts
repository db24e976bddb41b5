import request from "supertest";
import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from "vitest";
import type { Role } from "@shared/contract/permissions";
import { AuditEntryEntity } from "../../server/features/accounts";
import { checkExtract, loadExtract } from "../../server/features/extracts";
import { tellOfMissing } from "../../server/features/extracts/notices/missing-sales.service";
import { lookForMissing } from "../../server/features/extracts/notices/watch-sales";
import { salesDue } from "../../server/features/notices";
import { jobDefinitions } from "../../server/job-definitions";
import { OutboxMessageEntity, type OutboxMessage } from "../../server/mail";
import { act, checkedDirectly, loadCatalogueDirectly, loaded, salesFile, startExtractsApp, type ExtractsApp } from "../support/extracts";
import { addPerson, bearerOf, signedIn } from "../support/people";
import { expectProblem } from "../support/problems";

let test: ExtractsApp;
let planner: Awaited<ReturnType<typeof signedIn>>;

beforeAll(async () => {
  test = await startExtractsApp({ worker: false });
  await addPerson(test.services, { roles: ["category-manager"], name: "Nia Frost" });
  await addPerson(test.services, { roles: ["administrator"] });
  const { email } = await addPerson(test.services, { roles: ["planner"], name: "Per Lind" });
  planner = await signedIn(test.app, email);
  await loadCatalogueDirectly(test);
});
afterAll(() => test.stop());
beforeEach(async () => {
  await test.services.pool.query("truncate weekly_sales, weekly_sales_history, sales_confirmations, store_weeks, sent_notices, outbox_messages");
  await test.services.pool.query("delete from extracts where kind = 'sales'; update people set unwanted_notices = '{}'; update chain set sales_due_day = 1, sales_due_hour = 12, time_zone = 'Europe/London'");
});

const outbox = (): Promise<OutboxMessage[]> => test.services.orm.em.fork().find(OutboxMessageEntity, {}, { orderBy: { recipient: "asc", id: "asc" } });
const [june1, june8] = ["2026-06-01", "2026-06-08"];
const row = (week: string, store = "S1", units = 10) => `${week},${store},P1,${units},${(units * 1.79).toFixed(2)},1.79,,0,0,none`;

async function loadDirectly(name: string, ...rows: string[]): Promise<string> {
  const { id } = await checkedDirectly(test, { name, file: salesFile(...rows) });
  await loadExtract(test.services, { extractId: id });
  return id;
}

/** Someone of these roles, who goes when the test ends. */
async function withPerson(person: { roles: Role[]; email: string; name?: string }, run: (id: string) => Promise<void>): Promise<void> {
  const { id } = await addPerson(test.services, person);
  try {
    await run(id);
  } finally {
    await test.services.pool.query("update people set disabled_at = now() where id = $1", [id]);
  }
}

describe("the choice of notices", () => {
  const everything = { "extract-has-errors": true, "extract-loaded": true, "sales-missing": true };

  it("is all of them, until a person chooses otherwise, which the audit trail tells", async () => {
    expect((await planner.get("/api/session/notices").expect(200)).body).toEqual(everything);
    const chosen = { ...everything, "extract-loaded": false };
    expect((await planner.put("/api/session/notices").send(chosen).expect(200)).body).toEqual(chosen);
    expect((await planner.get("/api/session/notices").expect(200)).body).toEqual(chosen);
    await planner.put("/api/session/notices").send(chosen).expect(200);
    const entries = await test.services.orm.em.fork().find(AuditEntryEntity, { action: "notices.chosen" });
    expect(entries.map(({ detail }) => detail)).toEqual([{ unwanted: { from: [], to: ["extract-loaded"] } }]);
  });

  it("is the caller's own: made by who is signed in, for all notices there are and no others", async () => {
    expectProblem(await request(test.app).get("/api/session/notices"), 401, "not-signed-in");
    expectProblem(await request(test.app).put("/api/session/notices").send(everything), 401, "not-signed-in");
    const writer = await bearerOf(test.app, test.services, ["data-admin", "planner"], ["extracts:write"]);
    expectProblem(await request(test.app).get("/api/session/notices").set("Authorization", writer), 403, "not-allowed");
    expectProblem(await request(test.app).put("/api/session/notices").set("Authorization", writer).send(everything), 403, "not-allowed");
    for (const wrong of [{}, { "extract-loaded": false }, { ...everything, "sales-missing": "no" }, { ...everything, news: true }]) {
      expectProblem(await planner.put("/api/session/notices").send(wrong), 422, "invalid-request");
    }
    await test.services.pool.query("update people set disabled_at = now() where email like 'data-admin.planner@%'");
  });
});

describe("a check that finds errors", () => {
  it("is told to who uploaded the file and to data admins, with reasons, what to do and where", async () => {
    const { id } = await checkedDirectly(test, { name: "week 24.csv", file: salesFile(row(june1), row(june1, "S9"), row(june8, "S9"), row("June")) });
    const [mail, ...more] = await outbox();
    expect(more).toEqual([]);
    expect(mail).toMatchObject({ recipient: "data-admin@chain.example", subject: "week 24.csv: 3 errors found" });
    expect(mail?.text).toContain("The file week 24.csv (sales), which Test Person uploaded on 15 June 2026 at 10:00, has been checked.");
    expect(mail?.text).toContain("1 of its 4 rows can be used; 3 errors were found in the others.");
    expect(mail?.text).toContain("- There is no store with this code: 2 times\n");
    expect(mail?.text).toContain(`http://127.0.0.1:4310/extracts/${id}\n`);
    expect(mail?.text).toContain("Choose which e-mails you get: http://127.0.0.1:4310/notices");
  });

  it("is told where the file cannot be used at all, with the reason", async () => {
    await checkedDirectly(test, { name: "stores.csv", file: "store,name\nS1,Harbour Street" });
    expect(await outbox()).toMatchObject([{ subject: "stores.csv cannot be used", text: expect.stringContaining("Nothing was loaded.") }]);
  });

  it("is told where nobody has confirmed yet how the file is read", async () => {
    const file = ["Woche;Filiale;Artikel;Menge;Umsatz;Normalpreis", "01.06.2026;S1;P1;10;17,90;1,79", "01.06.2026;S2;P1;3;5,37;1,79"].join("\n");
    const { layoutOrigin, state, errorCount } = await checkedDirectly(test, { name: "other.csv", file });
    expect({ layoutOrigin, state, errorCount }).toEqual({ layoutOrigin: "proposed", state: "checked", errorCount: 0 });
    expect(await outbox()).toMatchObject([{ subject: "other.csv: confirm how it is read", text: expect.stringContaining("Someone must look at that and confirm it") }]);
  });

  it("is not told where there are warnings only, and once where the file is checked again", async () => {
    await checkedDirectly(test, { file: salesFile("2026-06-01,S1,P1,-1,-1.79,1.79,,0,0,none") });
    expect(await outbox()).toEqual([]);
    const { id } = await checkedDirectly(test, { file: salesFile(row("June")) });
    await checkExtract(test.services, { extractId: id });
    expect(await outbox()).toHaveLength(1);
  });

  it("is not told to who does not want it, nor to who has left", async () => {
    await withPerson({ roles: ["data-admin"], email: "other@chain.example", name: "Other" }, async (other) => {
      await test.services.pool.query("update people set unwanted_notices = '{extract-has-errors}' where email = 'data-admin@chain.example'");
      await checkedDirectly(test, { file: salesFile(row("June")) });
      expect(await outbox()).toMatchObject([{ recipient: "other@chain.example", text: expect.stringMatching(/^Hello Other,/) }]);
      await test.services.pool.query("update people set disabled_at = now() where id = $1", [other]);
      await checkedDirectly(test, { file: salesFile(row("June")) });
      expect(await outbox()).toHaveLength(1);
    });
  });
});

describe("a load", () => {
  it("of sales is told to data admins, planners and category managers: rows, weeks and where", async () => {
    const id = await loadDirectly("a.csv", row(june1), row(june8));
    const mails = await outbox();
    expect(mails.map(({ recipient }) => recipient)).toEqual(["category-manager@chain.example", "data-admin@chain.example", "planner@chain.example"]);
    expect(new Set(mails.map(({ subject }) => subject))).toEqual(new Set(["Sales of 2 weeks (1 June 2026 to 14 June 2026) loaded"]));
    expect(mails[0]?.text).toContain("Test Person loaded the file a.csv (sales). It holds sales of 2 weeks (1 June 2026 to 14 June 2026).\n");
    expect(mails[0]?.text).toContain("New rows: 2\nChanged rows: 0\nRows that were there already: 0");
    expect(mails[0]?.text).toContain(`http://127.0.0.1:4310/extracts/${id}`);
    expect(mails[0]?.text).toContain("http://127.0.0.1:4310/drivers");
  });

  it("that brought nothing new, or is of the catalogue, is told to data admins alone", async () => {
    await loadDirectly("a.csv", row(june1));
    await test.services.pool.query("truncate outbox_messages");
    await loadDirectly("again.csv", row(june1));
    expect(await outbox()).toMatchObject([{ recipient: "data-admin@chain.example", subject: "again.csv brought nothing new" }]);
    await test.services.pool.query("truncate outbox_messages");
    const { id } = await checkedDirectly(test, { kind: "stores", name: "more.csv", file: "store,name,region\nS8,New Road,coast" });
    await loadExtract(test.services, { extractId: id });
    expect(await outbox()).toMatchObject([{ recipient: "data-admin@chain.example", subject: "more.csv is loaded" }]);
  });

  it("that fails is told to nobody", async () => {
    const { id } = await checkedDirectly(test, { file: salesFile(row(june1)) });
    const stopped = loadExtract(test.services, { extractId: id, progress: async ({ done, total }) => { if (done === total) throw new Error("stopped"); } });
    await expect(stopped).rejects.toThrow("stopped");
    expect(await outbox()).toEqual([]);
  });
});

describe("missing sales", () => {
  // Monday 15 June 2026, 09:00 in London is 08:00 UTC; sales are due by 12:00.
  const at = (time: string) => ({ ...test.services, now: () => new Date(time) });
  const noon = "2026-06-15T11:00:00Z";

  it("are told to data admins once the hour has come, once for each week", async () => {
    await loadDirectly("a.csv", row(june1));
    await test.services.pool.query("truncate outbox_messages");
    expect(await tellOfMissing(at("2026-06-15T10:59:59Z"))).toBe(0);
    expect(await tellOfMissing(at(noon))).toBe(1);
    expect(await tellOfMissing(at("2026-06-21T22:59:59Z"))).toBe(0);
    const [mail, ...more] = await outbox();
    expect(more).toEqual([]);
    expect(mail).toMatchObject({ recipient: "data-admin@chain.example", subject: "Sales of the week of 8 June 2026 are missing" });
    expect(mail?.text).toContain("The sales of 8 June 2026 to 14 June 2026 were due by 15 June 2026, 12:00, and are not loaded. The last week loaded is that of 1 June 2026.");
    expect(await tellOfMissing(at("2026-06-22T11:00:00Z"))).toBe(1);
  });

  it("are not told where the week is loaded, or where nothing was ever loaded", async () => {
    expect(await tellOfMissing(at(noon))).toBe(0);
    await loadDirectly("a.csv", row(june8));
    expect(await tellOfMissing(at(noon))).toBe(0);
  });

  it("are told with the file that only needs to be loaded", async () => {
    await loadDirectly("a.csv", row(june1));
    await checkedDirectly(test, { name: "b.csv", file: salesFile(row(june8)) });
    await test.services.pool.query("truncate outbox_messages");
    await tellOfMissing(at(noon));
    expect((await outbox())[0]?.text).toContain("What to do: b.csv holds that week, and only needs to be loaded.");
  });

  it("are looked for without leaving a job where there is nothing to tell", async () => {
    const jobs = async () => (await test.services.pool.query("select 1 from jobs where kind = 'missing-sales'")).rows.length;
    expect(await lookForMissing(at(noon))).toBe(false);
    await loadDirectly("a.csv", row(june1));
    expect(await Promise.all([lookForMissing(at(noon)), lookForMissing(at(noon))])).toEqual([true, true]);
    expect(await jobs()).toBe(1);
    await tellOfMissing(at(noon));
    expect(await lookForMissing(at(noon))).toBe(false);
    expect(await jobs()).toBe(1);
  });
});

describe("when sales are due", () => {
  const london = { timeZone: "Europe/London", weekStart: 1, salesDueDay: 1, salesDueHour: 12 };
  const due = (settings: Partial<typeof london>, moment: string) => salesDue({ ...london, ...settings }, new Date(moment));

  it.each([
    ["before the hour", {}, "2026-06-15T10:59:59Z", { week: "2026-06-08", dueOn: "2026-06-15", isOver: false }],
    ["at the hour, in summer time", {}, "2026-06-15T11:00:00Z", { week: "2026-06-08", dueOn: "2026-06-15", isOver: true }],
    ["at the hour, in winter time", {}, "2026-01-12T12:00:00Z", { week: "2026-01-05", dueOn: "2026-01-12", isOver: true }],
    ["still in the week's last minute", {}, "2026-06-21T22:59:00Z", { week: "2026-06-08", dueOn: "2026-06-15", isOver: true }],
    ["no longer in the next week", {}, "2026-06-21T23:00:00Z", { week: "2026-06-15", dueOn: "2026-06-22", isOver: false }],
    ["on the day the week begins at midnight", { salesDueHour: 0 }, "2026-06-14T23:00:00Z", { week: "2026-06-08", dueOn: "2026-06-15", isOver: true }],
    ["on the last day of the week after", { salesDueDay: 0 }, "2026-06-21T11:00:00Z", { week: "2026-06-08", dueOn: "2026-06-21", isOver: true }],
    ["by weeks that begin on Thursday", { weekStart: 4, salesDueDay: 1 }, "2026-06-15T11:00:00Z", { week: "2026-06-04", dueOn: "2026-06-15", isOver: true }],
    ["by weeks that begin on Sunday", { weekStart: 0, salesDueDay: 1 }, "2026-06-15T11:00:00Z", { week: "2026-06-07", dueOn: "2026-06-15", isOver: true }],
    ["where the day is another than in UTC", { timeZone: "Pacific/Auckland", salesDueHour: 8 }, "2026-06-14T20:00:00Z", { week: "2026-06-08", dueOn: "2026-06-15", isOver: true }],
    // Clocks go forward from 01:00 to 02:00 on Sunday 29 March 2026, and back from 02:00 to 01:00 on Sunday 25 October.
    ["before an hour that a change of time leaves out", { salesDueDay: 0, salesDueHour: 1 }, "2026-03-29T00:59:59Z", { week: "2026-03-16", dueOn: "2026-03-29", isOver: false }],
    ["after an hour that a change of time leaves out", { salesDueDay: 0, salesDueHour: 1 }, "2026-03-29T01:00:00Z", { week: "2026-03-16", dueOn: "2026-03-29", isOver: true }],
    ["the first time an hour comes twice", { salesDueDay: 0, salesDueHour: 1 }, "2026-10-25T00:00:00Z", { week: "2026-10-12", dueOn: "2026-10-25", isOver: true }],
    ["the second time an hour comes twice", { salesDueDay: 0, salesDueHour: 1 }, "2026-10-25T01:00:00Z", { week: "2026-10-12", dueOn: "2026-10-25", isOver: true }],
    ["across New Year", {}, "2027-01-04T12:00:00Z", { week: "2026-12-28", dueOn: "2027-01-04", isOver: true }],
  ])("is told %s", (_when, settings, moment, expected) => {
    expect(due(settings, moment)).toEqual(expected);
  });
});

describe("a worker", () => {
  it("delivers what a script's upload and load tell, in the name of the token's person", async () => {
    await test.services.queue.work(jobDefinitions, test.services);
    const extract = await loaded(test, { name: "script.csv", file: salesFile(row(june1), row(june8, "S9")) });
    const mailbox = async (address: string) => {
      const answer = await fetch(`${process.env.TEST_MAIL_URL}/messages.json?to=${encodeURIComponent(address)}`);
      const { messages } = (await answer.json()) as { messages: { subject: string; text: string }[] };
      return messages.filter(({ text }) => text.includes(extract.id));
    };
    await vi.waitFor(async () => expect(await mailbox("data-admin@chain.example")).toHaveLength(2), { timeout: 15_000, interval: 100 });
    await vi.waitFor(async () => expect(await mailbox("planner@chain.example")).toHaveLength(1), { timeout: 15_000, interval: 100 });
    const [mail] = await mailbox("planner@chain.example");
    expect(mail).toMatchObject({ subject: "Sales of the week of 1 June 2026 loaded", text: expect.stringContaining("A script with an access token of Test Person loaded the file script.csv") });
    // Asking again for a load that is done tells nothing more.
    await act(test, `/api/extracts/${extract.id}/load`).expect(409);
    expect(await outbox()).toHaveLength(4);
  });
});
