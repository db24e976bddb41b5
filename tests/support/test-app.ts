import type { Express } from "express";
import { createApp } from "../../server/app";
import { closeServices, createServices } from "../../server/create-services";
import { readEnvironment } from "../../server/environment";
import { jobDefinitions } from "../../server/job-definitions";
import type { Services } from "../../server/services";
import { createTestDatabase } from "./test-database";

export type TestApp = { app: Express; services: Services; stop: () => Promise<void> };

/** The real application over an own database and the throw-away file store and mail server of the test command. */
export async function startTestApp({ worker = false, now }: { worker?: boolean; now?: () => Date } = {}): Promise<TestApp> {
  const database = await createTestDatabase();
  const environment = readEnvironment({
    NODE_ENV: "test",
    DATABASE_URL: database.url,
    DATABASE_POOL_SIZE: "5",
    SESSION_SECRET: "a secret for tests only, long enough to pass",
    S3_ENDPOINT: process.env.TEST_S3_ENDPOINT,
    S3_BUCKET: "shelftide",
    S3_ACCESS_KEY_ID: "S3RVER",
    S3_SECRET_ACCESS_KEY: "S3RVER",
    SMTP_URL: process.env.TEST_SMTP_URL,
    LOG_LEVEL: process.env.LOG_LEVEL ?? "silent",
    PUBLIC_URL: "http://127.0.0.1:4310",
  });
  const services = await createServices(environment, { now });
  if (worker) await services.queue.work(jobDefinitions, services);
  return {
    app: createApp(services),
    services,
    async stop() {
      await closeServices(services);
      await database.drop();
    },
  };
}
