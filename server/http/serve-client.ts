import express, { type Express } from "express";
import { existsSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import type { Environment } from "../environment";

const clientFolder = fileURLToPath(new URL("../../dist/client", import.meta.url));

/** Serves the built client: hashed files for a year, and the page itself, never cached, for every other address. */
export function serveClient(app: Express, environment: Environment): void {
  if (environment.NODE_ENV !== "production" && !existsSync(clientFolder)) return;
  app.use(
    "/assets",
    express.static(join(clientFolder, "assets"), { immutable: true, maxAge: "1y", fallthrough: false }),
  );
  app.use(express.static(clientFolder, { index: false, maxAge: 0 }));
  app.get(["/", "/*splat"], (_request, response) => {
    response.set("Cache-Control", "no-cache").sendFile(join(clientFolder, "index.html"));
  });
}
