import { setPriority } from "node:os";
import { closeServices, createServices } from "./create-services";
import { readEnvironment } from "./environment";
import { resumeCoverage, watchSales } from "./features/extracts";
import { jobDefinitions } from "./job-definitions";

/** The worker process: runs jobs until told to stop, then hands back what it cannot finish in seconds. */
// Requests go before background work on a small machine.
setPriority(10);
const services = await createServices(readEnvironment());
await services.queue.work(jobDefinitions, services);
await resumeCoverage(services);
watchSales(services);
services.logger.info("worker ready");

let stopping = false;
async function stop() {
  if (stopping) return;
  stopping = true;
  await closeServices(services);
  process.exit(0);
}
process.on("SIGTERM", () => void stop());
process.on("SIGINT", () => void stop());
