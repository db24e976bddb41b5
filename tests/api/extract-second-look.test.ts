import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import type { Extract, ExtractChanges } from "@shared/contract/extracts";
import { ChainEntity } from "../../server/features/chain";
import { loadExtract } from "../../server/features/extracts";
import { besideMeans } from "../../server/features/extracts/load/loaded-beside.repository";
import { secondLookReasons, type WeekBeside } from "../../server/features/extracts/load/second-look";
import { act, afterJob, checkedDirectly, loadCatalogueDirectly, read, salesFile, startExtractsApp, storedSales, type ExtractsApp } from "../support/extracts";
import { hasEnded, waitForJob } from "../support/jobs";

const week = (more: Partial<WeekBeside>): WeekBeside => ({
  week: "2026-06-08", new: 0, changed: 0, same: 0, missing: 0, unitsBefore: 0, unitsAfter: 0, loadedRows: 0, loadedUnits: 0, ...more,
});
const reasons = (weeks: WeekBeside[], share = 0.25) => secondLookReasons({ weeks, newWeeks: [], share });

describe("a second look is asked for", () => {
  it("where a loaded week's units change by more than the share, rows that stay counted in", () => {
    const restated = { loadedRows: 40, loadedUnits: 1_200, changed: 30, unitsBefore: 1_000 };
    expect(reasons([week({ ...restated, unitsAfter: 2_000 })])).toEqual(["Week 2026-06-08: units go from 1,200 to 2,200 (+83%)."]);
    expect(reasons([week({ ...restated, unitsAfter: 600 })])).toEqual(["Week 2026-06-08: units go from 1,200 to 800 (-33%)."]);
    expect(reasons([week({ ...restated, unitsAfter: 1_300 })])).toEqual([]);
    expect(reasons([week({ ...restated, unitsAfter: 1_300 })], 0.2)).toEqual(["Week 2026-06-08: units go from 1,200 to 1,500 (+25%)."]);
  });

  it("where a week of zeros is given sales, and not where zeros stay zeros", () => {
    expect(reasons([week({ loadedRows: 3, changed: 3, unitsAfter: 12.5 })])).toEqual(["Week 2026-06-08: units go from 0 to 12.5."]);
    expect(reasons([week({ loadedRows: 3, changed: 3 })])).toEqual([]);
  });

  it("where more than the share of a loaded week's rows is not in the file", () => {
    const partly = { loadedRows: 40, loadedUnits: 100, unitsBefore: 70, unitsAfter: 70 };
    expect(reasons([week({ ...partly, missing: 30, same: 10 })])).toEqual(["Week 2026-06-08: 30 of 40 rows loaded (75%) are not in the file."]);
    expect(reasons([week({ ...partly, missing: 10, same: 30 })])).toEqual([]);
  });

  it("where a new week is unlike those before it by more than half, or by the share where that is more", () => {
    const beside = { week: "2026-06-08", stores: 24, units: 10_000, weeksBefore: 8, meanBefore: 400 };
    const ofNew = (units: number, share = 0.25) => secondLookReasons({ weeks: [], newWeeks: [{ ...beside, units }], share });
    expect(ofNew(10_000)).toEqual(["Week 2026-06-08 is new and has 10,000 units in 24 stores; the 8 before it have 400 on average there (+2,400%)."]);
    expect(ofNew(199)).toEqual(["Week 2026-06-08 is new and has 199 units in 24 stores; the 8 before it have 400 on average there (-50%)."]);
    expect(ofNew(600)).toEqual([]);
    expect(ofNew(1_000, 1.5)).toEqual([]);
  });

  it("for the first weeks by name and for the others by number", () => {
    const many = Array.from({ length: 5 }, (_, at) => week({ week: `2026-05-0${at + 1}`, loadedRows: 1, loadedUnits: 10, unitsBefore: 10, unitsAfter: 20 }));
    expect(reasons(many).slice(2)).toEqual(["Week 2026-05-03: units go from 10 to 20 (+100%).", "In 2 weeks more, units change by more than 25%."]);
  });
});

describe("a new week", () => {
  const weeksBefore = ["2026-05-11", "2026-05-18", "2026-05-25", "2026-06-01"];
  const loaded = weeksBefore.flatMap((of) => [{ week: of, storeId: 1, units: 10 }, { week: of, storeId: 2, units: 30 }]);

  it("is put beside the mean of the weeks before it, in the stores that have them all", () => {
    const ofFile = [{ week: "2026-06-08", storeId: 1, units: 12 }, { week: "2026-06-08", storeId: 3, units: 99 }];
    expect(besideMeans({ newWeeks: ["2026-06-08"], ofFile, loaded })).toEqual([{ week: "2026-06-08", stores: 1, units: 12, weeksBefore: 4, meanBefore: 10 }]);
  });

  it("is beside nothing where fewer than four of the eight before it are loaded, or no store is the same", () => {
    const ofFile = [{ week: "2026-06-08", storeId: 1, units: 12 }];
    expect(besideMeans({ newWeeks: ["2026-06-08"], ofFile, loaded: loaded.filter(({ week: of }) => of !== "2026-05-18") })).toEqual([]);
    expect(besideMeans({ newWeeks: ["2026-06-08"], ofFile: [{ week: "2026-06-08", storeId: 9, units: 12 }], loaded })).toEqual([]);
  });
});

describe("a load that changes more than usual", () => {
  let test: ExtractsApp;

  beforeAll(async () => {
    test = await startExtractsApp();
    await loadCatalogueDirectly(test);
  });
  afterAll(() => test.stop());
  beforeEach(async () => {
    await test.services.pool.query("truncate weekly_sales, weekly_sales_history, sales_confirmations");
  });

  const row = (of: string, store: string, units: number) => `${of},${store},P1,${units},${(units * 1.79).toFixed(2)},1.79,,0,0,none`;
  const june1 = "2026-06-01";
  const check = (file: string, name = "file.csv") => checkedDirectly(test, { file, name });
  const request = (id: string, body?: object) => act(test, `/api/extracts/${id}/load`).send(body);
  const changesOf = async (id: string): Promise<ExtractChanges> => (await read(test, `/api/extracts/${id}/changes`).expect(200)).body;
  const units = async () => (await storedSales(test)).map(({ store, units: sold }) => `${store} ${sold}`);
  const extractOf = async (id: string): Promise<Extract> => (await read(test, `/api/extracts/${id}`).expect(200)).body;

  async function loadDirectly(file: string) {
    const { id } = await check(file);
    await loadExtract(test.services, { extractId: id, seen: "everything" });
  }

  it("is refused with the reasons, changes nothing, and loads once they are confirmed; the trail says so", async () => {
    await loadDirectly(salesFile(row(june1, "S1", 10), row(june1, "S2", 20)));
    const { id } = await check(salesFile(row(june1, "S1", 40)));
    expect((await changesOf(id)).secondLook).toEqual([expect.stringContaining("from 10 to 40 (+300%)")]);
    for (const body of [undefined, {}, { secondLook: false }]) {
      const { body: problem } = await request(id, body).expect(409);
      expect(problem).toMatchObject({
        code: "second-look-needed",
        detail: "This load changes more than usual. Week 2026-06-01: units go from 10 to 40 (+300%). Look at what it changes, and confirm it where it is right.",
      });
    }
    expect([await units(), (await extractOf(id)).state]).toEqual([["S1 10", "S2 20"], "checked"]);
    expect(await afterJob(test, await request(id, { secondLook: true }).expect(202))).toMatchObject({ state: "loaded" });
    expect(await units()).toEqual(["S1 40", "S2 20"]);
    const { rows: [entry] } = await test.services.pool.query("select detail from audit_entries where action = 'extract.loaded' and subject_id = $1", [id]);
    expect(entry.detail).toMatchObject({ changed: 1, secondLookConfirmed: ["Week 2026-06-01: units go from 10 to 40 (+300%)."] });
  });

  it("counts rows of its weeks and stores that the file lacks, and leaves them where they are", async () => {
    await loadDirectly(salesFile(row(june1, "S1", 10), row(june1, "S1", 10).replace("P1", "P2"), row(june1, "S2", 20), row("2026-06-08", "S1", 5)));
    const unchanged = await changesOf((await check(salesFile(row(june1, "S1", 10)))).id);
    expect(unchanged.totals).toEqual({ new: 0, changed: 0, same: 1, missing: 1 });
    expect(unchanged.secondLook).toEqual([]);
    const { id } = await check(salesFile(row(june1, "S1", 11)));
    const changes = await changesOf(id);
    expect(changes.totals).toEqual({ new: 0, changed: 1, same: 0, missing: 1 });
    expect(changes.weeks).toEqual([{ week: june1, new: 0, changed: 1, same: 0, missing: 1, unitsBefore: 10, unitsAfter: 11 }]);
    expect(changes.secondLook).toEqual(["Week 2026-06-01: 1 of 2 rows loaded (50%) is not in the file."]);
    await afterJob(test, await request(id, { secondLook: true }).expect(202));
    expect(await storedSales(test)).toHaveLength(4);
  });

  it("goes by the chain's share", async () => {
    await loadDirectly(salesFile(row(june1, "S1", 10)));
    const em = test.services.orm.em.fork();
    await em.nativeUpdate(ChainEntity, {}, { secondLookShare: 0.1 });
    const strict = await check(salesFile(row(june1, "S1", 12)));
    expect((await changesOf(strict.id)).secondLook).toEqual(["Week 2026-06-01: units go from 10 to 12 (+20%)."]);
    await em.nativeUpdate(ChainEntity, {}, { secondLookShare: 0.25 });
    expect((await changesOf((await check(salesFile(row(june1, "S1", 12)))).id)).secondLook).toEqual([]);
  });

  it("because it brings a week unlike those before it is asked about too", async () => {
    const before = ["2026-05-04", "2026-05-11", "2026-05-18", "2026-05-25"];
    await loadDirectly(salesFile(...before.flatMap((of) => [row(of, "S1", 10), row(of, "S2", 20)])));
    const { id } = await check(salesFile(row(june1, "S1", 10), row(june1, "S2", 2), row(june1, "S3", 500)));
    expect((await changesOf(id)).secondLook).toEqual(["Week 2026-06-01 is new and has 12 units in 2 stores; the 4 before it have 30 on average there (-60%)."]);
  });

  it("by reasons that came up since it was confirmed fails, is checked still, and tells them", async () => {
    const { id } = await check(salesFile(row(june1, "S1", 40)));
    expect((await changesOf(id)).secondLook).toEqual([]);
    await loadDirectly(salesFile(row(june1, "S1", 10)));
    const answer = await request(id).expect(202);
    const job = await waitForJob(test.services, answer.body.jobId, (found) => hasEnded(found) && !found.cleanupPending);
    expect(job).toMatchObject({ state: "failed", attempt: 1, error: { code: "second-look-needed" } });
    expect(await extractOf(id)).toMatchObject({ state: "checked", failure: { code: "second-look-needed", detail: expect.stringContaining("from 10 to 40 (+300%)") }, may: { load: true } });
    expect([await units(), (await changesOf(id)).secondLook]).toEqual([["S1 10"], ["Week 2026-06-01: units go from 10 to 40 (+300%)."]]);
    await request(id).expect(409);
    await afterJob(test, await request(id, { secondLook: true }).expect(202));
    expect(await units()).toEqual(["S1 40"]);
  });

  it("of the same file twice is none: every row is there already, and the job says so", async () => {
    const file = salesFile(row(june1, "S1", 10), row(june1, "S2", 20));
    await loadDirectly(file);
    const { id } = await check(file, "again.csv");
    expect(await changesOf(id)).toMatchObject({ totals: { new: 0, changed: 0, same: 2, missing: 0 }, secondLook: [] });
    const { jobId } = await afterJob(test, await request(id).expect(202));
    const { body: job } = await read(test, `/api/jobs/${jobId}`).expect(200);
    expect(job).toMatchObject({ state: "succeeded", result: { new: 0, changed: 0, same: 2 }, progress: { message: "Every row is there already: nothing was changed" } });
  });

  it("is asked for in words that can be read: anything but yes or no is refused", async () => {
    const { id } = await check(salesFile(row(june1, "S1", 40)));
    const { body } = await request(id, { secondLook: "perhaps" }).expect(422);
    expect(body.errors[0].path).toBe("secondLook");
  });
});
