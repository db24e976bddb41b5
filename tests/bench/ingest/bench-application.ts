import { randomUUID } from "node:crypto";
import { chmodSync, mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import type { Context } from "../../../infra/lib/command.mjs";
import { standInStore } from "../../../infra/lib/application-environment.mjs";
import { waitForHealth } from "../../../infra/lib/health.mjs";
import { startPart } from "../../../infra/lib/part.mjs";
import { projectRoot } from "../../../infra/lib/paths.mjs";
import { pickPort } from "../../../infra/lib/ports.mjs";
import { typeScript } from "../../../infra/lib/script.mjs";
import { startThrowAwayServices } from "../../../infra/lib/throw-away.mjs";
import { permissionsOf, type Role } from "@shared/contract/permissions";
import { createOrm } from "../../../server/database/orm";
import { createPerson } from "../../../server/features/accounts";
import { ensureChain } from "../../../server/features/chain";
import { createTestDatabase } from "../../support/test-database";
import { BenchClient } from "./bench-client";

export type BenchApplication = { folder: string; databaseUrl: string; client: BenchClient; webPid: number; workerPid: number };

const roles: Role[] = ["data-admin", "planner", "category-manager"];
const account = { email: "bench@chain.example", password: "a password for the bench" };
const leaveWithParent = ["--import", join(projectRoot, "infra/lib/leave-with-parent.mjs")];

/**
 * One web process and one worker, as `npm start` runs them, over services and a database that go when the command ends;
 * with a chain and a person who may upload and fit.
 */
export async function startBenchApplication({ context, say }: { context: Context; say: (line: string) => void }): Promise<BenchApplication> {
  const folder = mkdtempSync(join(tmpdir(), "ingest-bench-"));
  context.onClose(() => rmSync(folder, { recursive: true, force: true }));
  chmodSync(folder, 0o711);
  Object.assign(process.env, await startThrowAwayServices({ context, say }));
  const { url: databaseUrl } = await createTestDatabase();
  await addChainAndPerson(databaseUrl);
  const port = await pickPort({});
  const url = `http://127.0.0.1:${port}`;
  const start = (name: string, script: string) => {
    const log = join(folder, `${name}.log`);
    const part = startPart({
      name, log, cwd: projectRoot, args: [...typeScript, ...leaveWithParent, script], env: environmentFor({ databaseUrl, port, url }),
    });
    context.onClose(() => part.stop());
    return { pid: part.pid, failed: part.failed, log };
  };
  const web = start("web process", "server/main.ts");
  await Promise.race([waitForHealth({ url, log: web.log, stopping: context.stopping }), web.failed]);
  const worker = start("worker", "server/worker.ts");
  const client = await signIn({ url, stopping: context.stopping });
  return { folder, databaseUrl, client, webPid: web.pid, workerPid: worker.pid };
}

async function addChainAndPerson(databaseUrl: string): Promise<void> {
  const orm = await createOrm({ DATABASE_URL: databaseUrl, DATABASE_POOL_SIZE: 2 });
  await ensureChain(orm.em.fork(), { name: "Bench chain" });
  await createPerson(orm.em.fork(), { name: "Bench", ...account, roles, categories: ["*"] });
  await orm.close();
}

const environmentFor = ({ databaseUrl, port, url }: { databaseUrl: string; port: number; url: string }): NodeJS.ProcessEnv => ({
  ...process.env,
  NODE_ENV: "production", HOST: "127.0.0.1", PORT: String(port), PUBLIC_URL: url, DATABASE_URL: databaseUrl, SESSION_SECRET: randomUUID(),
  S3_ENDPOINT: process.env.TEST_S3_ENDPOINT, S3_REGION: standInStore.region, S3_BUCKET: standInStore.bucket,
  S3_ACCESS_KEY_ID: standInStore.key, S3_SECRET_ACCESS_KEY: standInStore.key, SMTP_URL: process.env.TEST_SMTP_URL,
});

/** Signs in as a person does, and makes a token as a script needs it. */
async function signIn({ url, stopping }: { url: string; stopping: AbortSignal }): Promise<BenchClient> {
  const post = (path: string, body: object, headers: Record<string, string> = {}) => fetch(`${url}${path}`, {
    method: "POST", signal: stopping, body: JSON.stringify(body), headers: { "Content-Type": "application/json", ...headers },
  });
  const session = await post("/api/session", account);
  const [cookie] = session.headers.getSetCookie();
  const answer = await post("/api/tokens", { name: "bench", permissions: permissionsOf(roles) }, { Cookie: cookie.split(";")[0] });
  const { token } = (await answer.json()) as { token: string };
  return new BenchClient({ url, token, stopping });
}
