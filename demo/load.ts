import { once } from "node:events";
import type { AddressInfo } from "node:net";
import { createApp } from "../server/app";
import { closeServices, createServices } from "../server/create-services";
import { readEnvironment } from "../server/environment";
import { jobDefinitions } from "../server/job-definitions";
import { defaultToday } from "./chain/calendar";
import { loadChain } from "./load/load-chain";

// The demo's command: node --import tsx demo/load.ts [TODAY], with the application's environment.
// It runs the application itself, web and worker in one process, and loads the chain through it over HTTP.

const environment = readEnvironment();
if (!environment.SHELFTIDE_EMBEDDED) {
  throw new Error("The demo and its accounts belong only into an installation that runs embedded on one machine");
}

const services = await createServices(environment);
try {
  await services.queue.work(jobDefinitions, services);
  const server = createApp(services).listen(0, "127.0.0.1");
  await once(server, "listening");
  const { port } = server.address() as AddressInfo;
  const url = `http://127.0.0.1:${port}`;
  await loadChain({ services, url, today: todayOf(services.now()), say: (line) => console.log(line) });
  server.closeAllConnections();
  server.close();
} finally {
  await closeServices(services);
}

/** The day given, else the default one; a clock that runs before that is believed, for sales lie in the past. */
function todayOf(now: Date): string {
  const clock = now.toISOString().slice(0, 10);
  return process.argv[2] ?? (clock < defaultToday ? clock : defaultToday);
}
