import { spawn, type ChildProcess } from "node:child_process";
import { createServer } from "node:net";
import { once } from "node:events";
import { fileURLToPath } from "node:url";
import { createTestDatabase } from "./test-database";

const root = fileURLToPath(new URL("../..", import.meta.url));

export type RunningApp = { url: string; databaseUrl: string; stop: () => Promise<void> };

/**
 * The product as people run it, one web process and one worker, over an own database. With `demo` the demo chain is
 * loaded first, by the same command the start uses.
 */
export async function startRunningApp({ demo = false }: { demo?: boolean } = {}): Promise<RunningApp> {
  const database = await createTestDatabase();
  const port = await freePort();
  const url = `http://127.0.0.1:${port}`;
  const environment = { ...process.env, ...environmentFor({ databaseUrl: database.url, port, url }) };
  const children: ChildProcess[] = [];
  const run = (script: string) => {
    const child = spawn(process.execPath, ["--import", "tsx", script], { cwd: root, env: environment, stdio: ["ignore", "ignore", "inherit"] });
    children.push(child);
    return child;
  };
  const stop = async () => {
    await Promise.all(children.map(stopChild));
    await database.drop();
  };
  try {
    if (demo) {
      const [code] = await once(run("demo/load.ts"), "exit");
      if (code !== 0) throw new Error(`Loading the demo ended with ${code}.`);
    }
    run("server/main.ts");
    run("server/worker.ts");
    await healthy(url);
  } catch (error) {
    await stop();
    throw error;
  }
  return { url, databaseUrl: database.url, stop };
}

function environmentFor({ databaseUrl, port, url }: { databaseUrl: string; port: number; url: string }) {
  return {
    NODE_ENV: "production",
    DATABASE_URL: databaseUrl,
    HOST: "127.0.0.1",
    PORT: String(port),
    PUBLIC_URL: url,
    SESSION_SECRET: "a secret for tests only, long enough to pass",
    S3_ENDPOINT: process.env.TEST_S3_ENDPOINT,
    S3_BUCKET: "shelftide",
    S3_ACCESS_KEY_ID: "S3RVER",
    S3_SECRET_ACCESS_KEY: "S3RVER",
    SMTP_URL: process.env.TEST_SMTP_URL,
    SHELFTIDE_EMBEDDED: "1",
    LOG_LEVEL: process.env.LOG_LEVEL ?? "error",
  };
}

async function stopChild(child: ChildProcess): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null) return;
  const ended = once(child, "exit");
  child.kill("SIGTERM");
  const late = setTimeout(() => child.kill("SIGKILL"), 15_000);
  await ended;
  clearTimeout(late);
}

async function freePort(): Promise<number> {
  const server = createServer().listen(0, "127.0.0.1");
  await once(server, "listening");
  const address = server.address();
  server.close();
  await once(server, "close");
  if (address === null || typeof address === "string") throw new Error("No port was given.");
  return address.port;
}

async function healthy(url: string): Promise<void> {
  const until = Date.now() + 120_000;
  while (Date.now() < until) {
    const ok = await fetch(`${url}/api/health`).then((response) => response.ok, () => false);
    if (ok) return;
    await new Promise((resolve) => setTimeout(resolve, 200));
  }
  throw new Error(`${url}/api/health was not ok within 120 s.`);
}
