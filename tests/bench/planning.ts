/**
 * How long a scenario of 24 stores x 12 weeks takes to answer one step of a slider, in one thread and after a warm-up.
 * `node --import tsx tests/bench/planning.ts [--json]`
 */
import { performance } from "node:perf_hooks";
import { prepareScenario, shownModel } from "@shared/planning";
import type { PlanCell, PreparedScenario } from "@shared/planning";
import { inventedModel, planCells } from "../planning/an-invented-store";

const FRAME_MS = 16;
const STEPS = 240;
const codes = Array.from({ length: 24 }, (_, index) => `S${index + 1}`);

type Change = (step: number) => Partial<PlanCell>;

/** Time of each of many steps, ascending; making the cells is the page's work and not counted. */
function timesOf(scenario: PreparedScenario, change: Change): number[] {
  const times: number[] = [];
  for (let step = 0; step < STEPS; step++) {
    const cells = planCells({ stores: codes, weeks: 12 }, () => change(step));
    const start = performance.now();
    scenario.evaluate({ cells, level: 0.8, costs: { fixedCost: 300 } });
    times.push(performance.now() - start);
  }
  return times.sort((one, other) => one - other);
}

const at = (times: readonly number[], share: number) => Number(times[Math.floor(share * (times.length - 1))].toFixed(3));
const drags: Record<string, Change> = {
  price: (step) => ({ price: 1.4 + step / 1_000, promotion: "feature", temperatureC: 20 }),
  promotion: (step) => ({ price: 1.6, promotion: step % 2 === 0 ? "feature" : "both" }),
  temperature: (step) => ({ price: 1.6, temperatureC: 14 + step / 40 }),
  everything: (step) => ({
    price: 1.4 + step / 1_000, regularPrice: 1.9 + step / 10_000, temperatureC: 14 + step / 40, normalTemperatureC: 14 + step / 50,
  }),
};

const models = codes.map((store, index) => ({ store, model: shownModel(inventedModel({ store, seed: index + 1 })) }));
const cold = performance.now();
const scenario = prepareScenario(models);
scenario.evaluate({ cells: planCells({ stores: codes, weeks: 12 }), level: 0.8 });
const coldMs = Number((performance.now() - cold).toFixed(3));
for (const change of Object.values(drags)) timesOf(scenario, change);

const figures: Record<string, { value: number; limit: number | null; unit: "ms" }> = {};
for (const [name, change] of Object.entries(drags)) {
  const times = timesOf(scenario, change);
  // What a step takes when nothing else has the processor: on a busy machine the median is mostly waiting.
  figures[`${name} dragged, 10 in 100 within`] = { value: at(times, 0.1), limit: null, unit: "ms" };
  figures[`${name} dragged, median`] = { value: at(times, 0.5), limit: FRAME_MS, unit: "ms" };
  figures[`${name} dragged, 95 in 100 within`] = { value: at(times, 0.95), limit: null, unit: "ms" };
}
figures["first evaluation, cold"] = { value: coldMs, limit: null, unit: "ms" };

const isOk = Object.values(figures).every(({ value, limit }) => limit === null || value <= limit);
console.log(`A scenario of 24 stores x 12 weeks, ${STEPS} steps each:`);
for (const [name, { value, limit }] of Object.entries(figures)) {
  console.log(`${name.padEnd(40)} ${value.toFixed(2).padStart(8)} ms${limit === null ? "" : `  (limit ${limit})`}`);
}
if (process.argv.includes("--json")) console.log(JSON.stringify({ bench: "planning", ok: isOk, figures }));
process.exitCode = isOk ? 0 : 1;
