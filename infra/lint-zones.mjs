import { existsSync, readdirSync } from "node:fs";
import { join } from "node:path";

/** @param {string} path */
function foldersIn(path) {
  if (!existsSync(path)) return [];
  return readdirSync(path, { withFileTypes: true }).filter((entry) => entry.isDirectory()).map((entry) => entry.name);
}

const sides = [
  { target: "./src", from: "./server", message: "The client never imports the server: share by shared/." },
  { target: "./server", from: "./src", message: "The server never imports the client: share by shared/." },
  { target: "./shared", from: ["./src", "./server", "./tests", "./demo", "./infra"], message: "shared/ is imported by both sides and imports neither." },
  { target: "./shared/engine", from: ["./shared/contract", "./shared/planning", "./shared/calendar"], message: "The engine imports nothing of ours outside itself." },
  { target: "./shared/calendar", from: ["./shared/contract", "./shared/planning", "./shared/engine"], message: "The calendar stands alone." },
  { target: "./shared/csv", from: ["./shared/contract", "./shared/planning", "./shared/engine", "./shared/calendar", "./shared/layouts"], message: "The text of tables stands alone." },
  { target: "./shared/planning", from: "./shared/contract", message: "Planning may import engine and calendar only." },
  { target: "./shared/layouts", from: ["./shared/engine", "./shared/planning"], message: "Layouts import the contract and the calendar only." },
  { target: ["./shared/engine", "./shared/calendar", "./shared/planning", "./shared/contract"], from: "./shared/layouts", message: "Only what reads files knows layouts." },
  { target: "./shared/contract", from: ["./shared/planning", "./shared/calendar"], message: "The contract imports engine types only." },
  { target: "./shared/contract", from: "./shared/engine", except: ["./types"], message: "The contract imports engine types only." },
];

/** Inside the engine each folder imports only those before it. */
const engineOrder = ["linalg", "basis", "penalty", "family", "fit", "inference", "predict"];
const engine = engineOrder.slice(0, -1).map((name, index) => ({
  target: `./shared/engine/${name}`,
  from: engineOrder.slice(index + 1).map((later) => `./shared/engine/${later}`),
  message: "Engine folders import only earlier ones: linalg, basis, penalty, family, fit, inference, predict.",
}));

/** @param {string[]} features the client's */
const clientZones = (features) => [
  ...features.map((name) => ({
    target: `./src/features/${name}`, from: "./src/features", except: [`./${name}`],
    message: "A client feature never imports another feature: the route composes them.",
  })),
  { target: "./src/features", from: "./src/app", message: "Features do not know the routes that compose them." },
  {
    target: ["./src/components", "./src/lib"], from: ["./src/features", "./src/app"],
    message: "Components and lib know no feature.",
  },
  {
    target: "./src/components/charts", from: "./src/lib/api-client.ts",
    message: "Charts: data in, events out, no fetching.",
  },
];

/** @param {string[]} features the server's */
const serverZones = (features) =>
  features.flatMap((name) => {
    const own = `./server/features/${name}`;
    return [
      ...features.filter((other) => other !== name).map((other) => ({
        target: own, from: `./server/features/${other}`, except: ["./index.ts"],
        message: "A server feature reaches another only through its index.ts.",
      })),
      { target: `${own}/**/!(*routes|index).ts`, from: `${own}/**/*routes.ts`, message: "Only index.ts imports routes." },
      {
        target: `${own}/**/*repository.ts`, from: `${own}/**/*(*service|*presenter).ts`,
        message: "Repositories know no service or presenter.",
      },
      {
        target: `${own}/**/*routes.ts`, from: `${own}/**/*repository.ts`,
        message: "routes -> service -> repository.",
      },
    ];
  });

/**
 * Who may import whom, as zones of import-x/no-restricted-paths, generated from the folders that exist.
 * A zone reads: files under `target` may not import files under `from`, `except` aside.
 * @param {string} root the folder that holds src/, server/ and shared/
 */
export const zonesFor = (root) => [
  ...sides,
  ...engine,
  ...clientZones(foldersIn(join(root, "src/features"))),
  ...serverZones(foldersIn(join(root, "server/features"))),
];

export const zones = zonesFor(".");
