import { createHash } from "node:crypto";
import type request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { Extract, ExtractIssue } from "@shared/contract/extracts";
import type { ExtractLayout } from "@shared/contract/saved-layouts";
import { act, loadCatalogue, read, startExtractsApp, upload, type ExtractsApp } from "../support/extracts";
import { hasEnded, waitForJob } from "../support/jobs";
import { nastyCatalogue, nastyCells, nastyForms, type NastyFile } from "../support/nasty-files";
import { nastyButRight, nastySpreadsheetCells, nastyTables, nastyDoubted } from "../support/nasty-files-from-spreadsheets";
import { nastyInLayouts } from "../support/nasty-files-in-layouts";
import { nastyRefused } from "../support/nasty-files-refused";

/*
 * Every nasty file goes the way a script takes: uploaded, checked by the worker, its issues read, the original taken back,
 * and loaded where every row can be used. All wait in the queue together, since a queue is looked into twice a second only.
 */

const everyFile = [...nastyRefused, ...nastyTables, ...nastyForms, ...nastyCells, ...nastySpreadsheetCells, ...nastyButRight, ...nastyDoubted, ...nastyInLayouts, ...nastyCatalogue];
/** An address may upload 60 files a minute; after so many the minute is taken to be over. */
const filesOfOneMinute = 50;

type Outcome = { upload: request.Response; checked?: Extract; issues?: ExtractIssue[]; warnings?: string[]; original?: string; loaded?: Extract };

let test: ExtractsApp;
const outcomes = new Map<NastyFile, Outcome>();

const doesLoad = ({ rows, proposed }: NastyFile) => rows !== undefined && rows[0] === rows[1] && !proposed;
const sha256 = (file: string | Buffer) => createHash("sha256").update(file).digest("hex");

beforeAll(async () => {
  test = await startExtractsApp();
  await loadCatalogue(test);
  await uploadAll();
  for (const outcome of outcomes.values()) await readChecked(outcome);
  const toLoad = [...outcomes].filter(([nasty, { checked }]) => doesLoad(nasty) && checked?.state === "checked").map(([, outcome]) => outcome);
  await loadAll(toLoad);
  // What the files before it have loaded can make a file look unusual only now.
  for (const outcome of toLoad.filter(({ loaded }) => loaded?.failure?.code === "second-look-needed")) await loadAgain(outcome);
}, 300_000);
afterAll(() => test.stop());

async function uploadAll(): Promise<void> {
  for (const [at, nasty] of everyFile.entries()) {
    if (at % filesOfOneMinute === 0) await test.services.pool.query("delete from rate_limits");
    const { kind, file, name } = nasty;
    outcomes.set(nasty, { upload: await upload(test, { kind, file, name: name?.[0] }) });
  }
}

async function loadAll(toLoad: readonly Outcome[]): Promise<void> {
  const jobs = new Map<Outcome, string>();
  for (const outcome of toLoad) {
    const { body } = await act(test, `/api/extracts/${outcome.checked?.id}/load`).send({ secondLook: true }).expect(202);
    jobs.set(outcome, body.jobId);
  }
  for (const [outcome, jobId] of jobs) outcome.loaded = await extractAfter(jobId, String(outcome.checked?.id));
}

/** One load tells by what it is unusual now, and the next confirms that. */
async function loadAgain(outcome: Outcome): Promise<void> {
  for (let tries = 0; tries < 2 && outcome.loaded?.state !== "loaded"; tries++) await loadAll([outcome]);
}

async function extractAfter(jobId: string, extractId: string): Promise<Extract> {
  await waitForJob(test.services, jobId, (job) => hasEnded(job) && !job.cleanupPending, 120_000);
  return (await read(test, `/api/extracts/${extractId}`).expect(200)).body as Extract;
}

async function readChecked(outcome: Outcome): Promise<void> {
  const { status, body } = outcome.upload;
  if (status !== 202) return;
  outcome.checked = await extractAfter(body.jobId, body.id);
  outcome.issues = (await read(test, `/api/extracts/${body.id}/issues?limit=1000`).expect(200)).body.items;
  if (outcome.checked.layout?.origin === "proposed") {
    const layout = (await read(test, `/api/extracts/${body.id}/layout`).expect(200)).body as ExtractLayout;
    outcome.warnings = layout.preview.warnings.map(({ code }) => code).sort();
  }
  const { body: bytes } = await read(test, `/api/extracts/${body.id}/original`).buffer(true).parse((response, done) => {
    const chunks: Buffer[] = [];
    response.on("data", (chunk: Buffer) => chunks.push(chunk)).on("end", () => done(null, Buffer.concat(chunks)));
  }).expect(200);
  outcome.original = sha256(bytes);
}

function outcomeOf(nasty: NastyFile): Outcome {
  const outcome = outcomes.get(nasty);
  if (!outcome) throw new Error("The file was not uploaded.");
  return outcome;
}

function expectRefused(nasty: NastyFile, [status, code]: [number, string]): void {
  const { body } = outcomeOf(nasty).upload;
  expect(body).toMatchObject({ status, code, detail: expect.stringMatching(/^[A-Z].*\.$/) });
}

function expectChecked(nasty: NastyFile): void {
  const { upload: { status, body }, checked, issues = [], warnings, original } = outcomeOf(nasty);
  expect({ status, code: body.code }).toEqual({ status: 202, code: undefined });
  expect({ state: checked?.state === "loaded" ? "checked" : checked?.state, failure: checked?.failure }).toEqual(nasty.unusable
    ? { state: "unusable", failure: { code: nasty.unusable[0], detail: expect.stringMatching(nasty.unusable[1]) } }
    : { state: "checked", failure: null });
  expect(original).toBe(sha256(nasty.file));
  expect(warnings).toEqual(nasty.proposed);
  if (nasty.proposed) expect(checked).toMatchObject({ layout: { origin: "proposed", isConfirmed: false }, may: { load: false } });
  if (nasty.name) expect(checked?.fileName).toBe(nasty.name[1]);
  if (nasty.rows) expect([checked?.rows?.read, checked?.rows?.usable]).toEqual(nasty.rows);
  if (nasty.issues) expect(issues.map(({ line, column, rule }) => `${line} ${column} ${rule}`).sort()).toEqual(nasty.issues);
  for (const { reason, remedy } of issues) expect([reason, remedy].every((text) => text.length > 5)).toBe(true);
}

const named = (files: readonly NastyFile[]) => files.map((nasty) => [nasty.what, nasty] as const);

describe("an upload is refused, sent as sales, that is", () => {
  it.each(named(everyFile.filter(({ refused }) => refused)))("%s", (_, nasty) => expectRefused(nasty, nasty.refused ?? [0, ""]));

  it("and nothing of it is kept", async () => {
    const accepted = [...outcomes.values()].filter(({ upload: { status } }) => status === 202);
    const [{ extracts, incoming }] = (await test.services.pool.query("select (select count(*)::int from extracts) as extracts, (select count(*)::int from incoming_files) as incoming")).rows;
    const catalogueFiles = 2;
    expect({ extracts, incoming }).toEqual({ extracts: accepted.length + catalogueFiles, incoming: 0 });
  });
});

describe("a file is found unusable, with the reason, that is or has", () => {
  it.each(named(everyFile.filter(({ unusable }) => unusable)))("%s", (_, nasty) => expectChecked(nasty));
});

describe("a file is read by a layout that waits to be confirmed, that is or has", () => {
  it.each(named(everyFile.filter((nasty) => nasty.proposed && !nasty.unusable)))("%s", async (_, nasty) => {
    expectChecked(nasty);
    const { body } = await act(test, `/api/extracts/${outcomeOf(nasty).checked?.id}/load`).expect(409);
    expect(body.code).toBe("layout-unconfirmed");
  });
});

describe("a file has its bad rows listed and keeps the others, that has", () => {
  it.each(named(everyFile.filter((nasty) => nasty.rows && !nasty.unusable && !nasty.proposed && !doesLoad(nasty))))("%s", (_, nasty) => expectChecked(nasty));
});

describe("a file loads whole that is or has", () => {
  it.each(named(everyFile.filter(doesLoad)))("%s", async (_, nasty) => {
    expectChecked(nasty);
    const { loaded } = outcomeOf(nasty);
    expect(loaded?.state).toBe("loaded");
    const { body } = await read(test, `/api/extracts/${loaded?.id}/changes`).expect(200);
    const { new: added, changed, same } = body.totals;
    const repeated = outcomeOf(nasty).issues?.filter(({ rule }) => rule === "repeated-row").length ?? 0;
    expect(added + changed + same).toBe((nasty.rows?.[1] ?? 0) - repeated);
  });
});

describe("what was loaded", () => {
  it("has text as the file had it, whatever it means to a database or a spreadsheet", async () => {
    const { rows } = await test.services.pool.query<{ code: string; name: string; region: string }>("select code, name, region from stores where code like '%R%' order by code");
    expect(rows).toEqual([
      { code: "../R3", name: "<script>alert(1)</script>", region: "coast" },
      { code: "R1", name: "\u05d7\u05e0\u05d5\u05ea \ud83c\udfea", region: "coast" },
      { code: "R2", name: "=1+1", region: "\\." },
      { code: "R4;--", name: "@R4", region: "coast" },
    ]);
  });
});

it("the table has at least 60 files, each with one outcome and a name of its own", () => {
  expect(everyFile.length).toBeGreaterThanOrEqual(60);
  expect(new Set(everyFile.map(({ kind, what }) => `${kind} ${what}`)).size).toBe(everyFile.length);
  for (const { refused, unusable, rows } of everyFile) expect(Number(refused !== undefined) + Number(unusable !== undefined || rows !== undefined)).toBe(1);
});
