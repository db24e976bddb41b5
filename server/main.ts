import { createApp } from "./app";
import { closeServices, createServices } from "./create-services";
import { readEnvironment } from "./environment";

/** The web process: listens, and lets running requests end when told to stop. */
const environment = readEnvironment();
const services = await createServices(environment);
const server = createApp(services).listen(environment.PORT, environment.HOST, (error?: Error) => {
  if (error) {
    services.logger.fatal({ err: error }, `cannot listen on ${environment.HOST}:${environment.PORT}`);
    process.exit(1);
  }
  services.logger.info(`listening on http://${environment.HOST}:${environment.PORT}`);
});

// A file of 2 GB on a slow line takes longer than Node's default of five minutes; slow headers are still cut off.
server.requestTimeout = 4 * 3_600_000;

let stopping = false;
function stop() {
  if (stopping) return;
  stopping = true;
  // Ends open event streams, which would otherwise keep the process alive.
  services.stopping.abort();
  setTimeout(() => server.closeAllConnections(), 5_000).unref();
  server.close(() => void closeServices(services).then(() => process.exit(0)));
}
process.on("SIGTERM", stop);
process.on("SIGINT", stop);
