/**
 * How long a million rows of sales take from the request's first byte until they can be queried, through the HTTP interface
 * of a web process and a worker of its own, against PostgreSQL's own \copy of the same rows into an equal table; the worker's
 * peak memory; and how long other reads take meanwhile.
 * `npm run bench -- ingest [--rows 1000000] [--json]`
 */
import { join } from "node:path";
import pg from "pg";
import { runCommand, type Context } from "../../infra/lib/command.mjs";
import { Problem } from "../../infra/lib/problem.mjs";
import { startBenchApplication, type BenchApplication } from "./ingest/bench-application";
import { timeCopy } from "./ingest/copy-yardstick";
import {
  modelledProduct, modelledSalesFile, modelledStore, productCodes, productsFile, storesFile, storesFor, writeSales, type DatabaseIds,
} from "./ingest/invented-sales";
import { peakMemoryMb } from "./ingest/peak-memory";
import { quantile, readMeanwhile, type ReadTimes } from "./ingest/reads-meanwhile";
import { StatementSamples, type StatementTime } from "./ingest/statement-samples";
import { timeLoad, type TimedLoad } from "./ingest/timed-load";

const limits = { copyTimes: 4, workerMb: 400, readMs: 200 };
const longestMs = 8 * 60_000;

type Figure = { value: number; limit: number | null; unit: string };
type Outcome = { rows: number; copyMs: number[]; load: TimedLoad; idle: ReadTimes; busy: ReadTimes; statements: StatementTime[]; workerMb: number; webMb: number };

const say = (line: string) => console.error(line);

function wantedRows(): number {
  const at = process.argv.indexOf("--rows");
  const rows = at === -1 ? 1_000_000 : Number(process.argv[at + 1]);
  if (!Number.isInteger(rows) || rows < 1_000 || rows > 20_000_000) throw new Problem("--rows takes a whole number from 1000 to 20000000.");
  return rows;
}

/** Loads the catalogue and the sales of one product, and fits that product's model. */
async function prepare({ client }: BenchApplication, rows: number): Promise<string> {
  await client.load({ kind: "stores", content: storesFile(storesFor(rows)) });
  await client.load({ kind: "products", content: productsFile() });
  await client.load({ kind: "sales", content: modelledSalesFile() });
  const { id } = await client.call<{ id: string }>("/api/models", { method: "POST", body: { product: modelledProduct, stores: [modelledStore] } });
  return id;
}

async function idsOf(pool: pg.Pool): Promise<DatabaseIds> {
  const read = async (table: string) => new Map((await pool.query<{ code: string; id: number }>(`select code, id from ${table}`)).rows.map(({ code, id }) => [code, id]));
  return { stores: await read("stores"), products: await read("products") };
}

async function measure({ application, rows, stopping }: { application: BenchApplication; rows: number; stopping: AbortSignal }): Promise<Outcome> {
  const { client, folder, databaseUrl, webPid, workerPid } = application;
  const pool = new pg.Pool({ connectionString: databaseUrl, max: 3 });
  try {
    const model = await prepare(application, rows);
    const files = { csv: join(folder, "sales.csv"), copy: join(folder, "copy.csv") };
    await writeSales({ rows, ...files, ids: await idsOf(pool) });
    const copy = () => timeCopy({ pool, databaseUrl, file: files.copy, rows, stopping });
    say(`${rows} rows are written; \\copy twice, then ours, then \\copy again.`);
    const before = [await copy(), await copy()];
    const paths = ["/api/products", "/api/stores", `/api/models/${model}/curves?store=${modelledStore}`];
    const idle = readMeanwhile({ client, paths, stopping });
    await new Promise((resolve) => setTimeout(resolve, 2_000));
    const idleTimes = await idle.stop();
    const busy = readMeanwhile({ client, paths, stopping });
    const samples = new StatementSamples(pool);
    const load = await timeLoad({ client, path: files.csv, rows, queryPath: `/api/sales?product=${productCodes[0]}&store=${modelledStore}` });
    const busyTimes = await busy.stop();
    const statements = await samples.stop({ leastMs: 100 });
    await requireLoaded(pool, { extractId: load.extractId, rows });
    const after = await copy();
    return { rows, copyMs: [...before, after], load, idle: idleTimes, busy: busyTimes, statements, workerMb: peakMemoryMb(workerPid), webMb: peakMemoryMb(webPid) };
  } finally {
    client.close();
    await pool.end();
  }
}

async function requireLoaded(pool: pg.Pool, { extractId, rows }: { extractId: string; rows: number }): Promise<void> {
  const { rows: [{ count }] } = await pool.query<{ count: number }>("select count(*)::int as count from weekly_sales where extract_id = $1", [extractId]);
  if (count !== rows) throw new Error(`${count} rows are loaded, not ${rows}.`);
}

const rounded = (value: number, decimals = 1) => Number(value.toFixed(decimals));

function figuresOf({ rows, copyMs, load, idle, busy, workerMb, webMb }: Outcome): Record<string, Figure> {
  const copy = quantile(copyMs, 0.5);
  const readTimes = (times: ReadTimes) => [...times.values()].flat();
  return {
    timesCopy: { value: rounded(load.totalMs / copy, 2), limit: limits.copyTimes, unit: "times \\copy" },
    workerMemory: { value: rounded(workerMb), limit: limits.workerMb, unit: "MB" },
    readsP95: { value: rounded(quantile(readTimes(busy), 0.95)), limit: limits.readMs, unit: "ms" },
    rows: { value: rows, limit: null, unit: "rows" },
    firstByteToQueryable: { value: rounded(load.totalMs), limit: null, unit: "ms" },
    copyMedian: { value: rounded(copy), limit: null, unit: "ms" },
    copyQuickest: { value: rounded(Math.min(...copyMs)), limit: null, unit: "ms" },
    copySlowest: { value: rounded(Math.max(...copyMs)), limit: null, unit: "ms" },
    readsP95Idle: { value: rounded(quantile(readTimes(idle), 0.95)), limit: null, unit: "ms" },
    readsMeanwhile: { value: readTimes(busy).length, limit: null, unit: "reads" },
    webMemory: { value: rounded(webMb), limit: null, unit: "MB" },
  };
}

function print(figures: Record<string, Figure>, { load, busy, statements }: Outcome): void {
  for (const [name, { value, limit, unit }] of Object.entries(figures)) {
    const verdict = limit === null ? "" : `  (limit ${limit}: ${value <= limit ? "kept" : "MISSED"})`;
    console.log(`${name.padEnd(24)} ${String(value).padStart(10)} ${unit}${verdict}`);
  }
  console.log("\nThe way of the rows, ms:");
  for (const { name, ms } of load.stages) console.log(`${ms.toFixed(0).padStart(8)}  ${name}`);
  console.log("\nReads meanwhile, ms: median, 95 in 100 within, longest:");
  for (const [path, times] of busy) {
    console.log(`${[0.5, 0.95, 1].map((share) => quantile(times, share).toFixed(0).padStart(6)).join("")}  ${path}`);
  }
  console.log("\nStatements, ms at work and ms waiting for the program:");
  for (const { statement, workingMs, waitingMs } of statements.slice(0, 14)) {
    console.log(`${workingMs.toFixed(0).padStart(8)}${waitingMs.toFixed(0).padStart(8)}  ${statement}`);
  }
}

async function bench(context: Context): Promise<number> {
  const rows = wantedRows();
  const late = setTimeout(() => context.stop(`The bench was not done within ${longestMs / 60_000} minutes and was stopped.`), longestMs);
  context.onClose(() => clearTimeout(late));
  const application = await startBenchApplication({ context, say });
  const outcome = await measure({ application, rows, stopping: context.stopping });
  const figures = figuresOf(outcome);
  const isOk = Object.values(figures).every(({ value, limit }) => limit === null || value <= limit);
  print(figures, outcome);
  const { load: { stages }, statements } = outcome;
  if (process.argv.includes("--json")) console.log(JSON.stringify({ bench: "ingest", ok: isOk, figures, stages, statements }));
  return isOk ? 0 : 1;
}

await runCommand(bench);
