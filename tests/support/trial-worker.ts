import { closeServices, createServices } from "../../server/create-services";
import { readEnvironment } from "../../server/environment";
import { trialJobs, trialTiming } from "./trial-jobs";

/** A worker process for tests, the same as the real one but for its jobs. */
const services = await createServices(readEnvironment(), { jobTiming: trialTiming });
await services.queue.work(trialJobs, services);
process.stdout.write("ready\n");
process.on("SIGTERM", () => void closeServices(services).then(() => process.exit(0)));
