import react from "@vitejs/plugin-react";
import { fileURLToPath } from "node:url";
import { defineConfig } from "vitest/config";

const at = (path: string) => fileURLToPath(new URL(path, import.meta.url));
const alias = { "@shared": at("./shared"), "@": at("./src") };

/** One project per kind of test; `infra/test.mjs` runs them in this order. */
export default defineConfig({
  test: {
    projects: [
      { resolve: { alias }, test: { name: "unit", environment: "node", include: ["tests/{engine,planning,calendar,contract,layouts,demo,infra}/**/*.test.ts"], exclude: ["tests/engine/reference/**"], testTimeout: 30_000 } },
      { plugins: [react()], resolve: { alias }, test: { name: "client", environment: "jsdom", include: ["tests/client/**/*.test.{ts,tsx}"], testTimeout: 15_000 } },
      // MikroORM loads TypeScript migrations by itself, so the workers need tsx's loader.
      { resolve: { alias }, test: { name: "api", environment: "node", include: ["tests/api/**/*.test.ts"], execArgv: ["--import", "tsx"], testTimeout: 30_000, hookTimeout: 60_000, maxWorkers: 2 } },
      { resolve: { alias }, test: { name: "browser", environment: "node", include: ["tests/browser/**/*.test.ts"], execArgv: ["--import", "tsx"], testTimeout: 90_000, hookTimeout: 180_000, maxWorkers: 1, fileParallelism: false } },
      { resolve: { alias }, test: { name: "reference", environment: "node", include: ["tests/engine/reference/**/*.test.ts"], execArgv: ["--import", "tsx"], testTimeout: 600_000, hookTimeout: 600_000, maxWorkers: 1, fileParallelism: false } },
    ],
  },
});
