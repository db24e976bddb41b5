import { spawn } from "node:child_process";
import { once } from "node:events";
import { createServer, type AddressInfo } from "node:net";
import { writeFileSync } from "node:fs";
import { join, resolve } from "node:path";
import { describe, expect, it } from "vitest";
import { temporaryFolders } from "./temporary-folder";

const makeFolder = temporaryFolders();

interface Outcome {
  code: number | null;
  output: string;
}

async function runToEnd(args: string[], env: NodeJS.ProcessEnv = process.env, onOutput?: (kill: () => void) => void): Promise<Outcome> {
  const child = spawn(process.execPath, args, { env, stdio: ["ignore", "pipe", "pipe"] });
  let output = "";
  for (const stream of [child.stdout, child.stderr]) {
    stream.on("data", (chunk) => {
      output += chunk;
      onOutput?.(() => child.kill("SIGINT"));
    });
  }
  const [code] = await once(child, "close");
  return { code, output };
}

function runMain(body: string, onOutput?: (kill: () => void) => void): Promise<Outcome> {
  const imports = ["command", "problem"].map((name) => `import * as ${name} from ${JSON.stringify(resolve(`infra/lib/${name}.mjs`))};`);
  const code = `${imports.join("\n")}\nawait command.runCommand(async (context) => { ${body} });`;
  return runToEnd(["--input-type=module", "-e", code], process.env, onOutput);
}

describe("a command", () => {
  it("undoes what it started, last first, and exits with its own code", async () => {
    const outcome = await runMain(`
      context.onClose(() => console.log("database stopped"));
      context.onClose(() => console.log("web stopped"));
      return 3;
    `);
    expect(outcome).toEqual({ code: 3, output: "web stopped\ndatabase stopped\n" });
  });

  it("shows a problem as its one sentence, after which all is undone", async () => {
    const outcome = await runMain(`
      context.onClose(() => console.error("stopped"));
      throw new problem.Problem("Port 4310 is used: choose another.");
    `);
    expect(outcome).toEqual({ code: 1, output: "Port 4310 is used: choose another.\nstopped\n" });
  });

  it("goes on undoing when one step of it fails", async () => {
    const outcome = await runMain(`
      context.onClose(() => console.error("database stopped"));
      context.onClose(() => { throw new problem.Problem("The web process would not stop."); });
    `);
    expect(outcome).toEqual({ code: 1, output: "The web process would not stop.\ndatabase stopped\n" });
  });

  it("stops in order on Ctrl-C, also in the middle of a wait", async () => {
    const body = `
      context.onClose(() => console.log("stopped"));
      console.log("waiting");
      await command.pause(60_000, context.stopping);
      console.log("never reached");
    `;
    expect(await runMain(body, (kill) => kill())).toEqual({ code: 130, output: "waiting\nstopped\n" });
  });

  it("ends well when it was running until Ctrl-C", async () => {
    const body = `
      console.log("running");
      await command.untilStopped(context.stopping);
      console.log("stopping");
    `;
    expect(await runMain(body, (kill) => kill())).toEqual({ code: 0, output: "running\nstopping\n" });
  });

  it("can be ended from within, with the reason", async () => {
    const outcome = await runMain(`
      setTimeout(() => context.stop("The worker keeps ending."), 50);
      await command.untilStopped(context.stopping);
    `);
    expect(outcome).toEqual({ code: 1, output: "The worker keeps ending.\n" });
  });
});

describe("npm start", () => {
  const start = resolve("infra/start.mjs");
  const clean = () => {
    const settings = /^(PORT|DATABASE_URL|S3_|SMTP_URL|MAIL_FROM|SHELFTIDE_|npm_)/;
    const kept = Object.entries(process.env).filter(([name]) => !settings.test(name));
    return { ...Object.fromEntries(kept), SHELFTIDE_DATA: join(makeFolder(), "data") };
  };

  it("refuses a busy port with one sentence, and gives its turn back", async () => {
    const server = createServer().listen(0, "127.0.0.1");
    await once(server, "listening");
    const { port } = server.address() as AddressInfo;
    const env = { ...clean(), PORT: String(port) };
    const first = await runToEnd([start], env);
    const second = await runToEnd([start], env);
    server.close();
    const sentence = `Port ${port} is used by another program: stop that program, or choose another port with PORT=${port + 10} npm start.\n`;
    expect(first).toEqual({ code: 1, output: sentence });
    expect(second).toEqual(first);
  });

  it("refuses a data folder that is a file", async () => {
    const env = clean();
    writeFileSync(env.SHELFTIDE_DATA, "");
    const { code, output } = await runToEnd([start], env);
    expect(code).toBe(1);
    expect(output).toBe(`${env.SHELFTIDE_DATA} is a file where a folder is needed: move it away, then start again.\n`);
  });

  it("refuses a port that is none before it touches anything", async () => {
    expect(await runToEnd([start], { ...clean(), PORT: "http" })).toEqual({
      code: 1, output: "PORT=http is not a port: give a whole number from 1 to 65535, such as PORT=4310.\n",
    });
  });
});
