import { spawn } from "node:child_process";
import { once } from "node:events";
import { join, resolve } from "node:path";
import { describe, expect, it } from "vitest";
import { startPart } from "../../infra/lib/part.mjs";
import { identify, isAlive, parentOf } from "../../infra/lib/process-identity.mjs";
import { stopProcess } from "../../infra/lib/stop-process.mjs";
import { temporaryFolders } from "./temporary-folder";

const makeFolder = temporaryFolders();
const leaveWithParent = resolve("infra/lib/leave-with-parent.mjs");

function startNode(code: string) {
  const child = spawn(process.execPath, ["-e", code], { stdio: ["ignore", "pipe", "inherit"] });
  return { child, identity: identify(child.pid!)! };
}

describe("a process", () => {
  it("is told from a later one with the same number", () => {
    const own = identify(process.pid)!;
    expect(isAlive(own)).toBe(true);
    expect(isAlive({ ...own, startedAt: `${own.startedAt}1` })).toBe(false);
  });

  it("is not alive when its number is none, or was never given", () => {
    expect(identify(-1)).toBeNull();
    expect(identify(0)).toBeNull();
    expect(identify(2 ** 22 + 1)).toBeNull();
    expect(isAlive(null)).toBe(false);
  });

  it("knows what started it", () => {
    const { child } = startNode("setInterval(() => {}, 1000)");
    expect(parentOf(child.pid!)).toBe(process.pid);
    child.kill("SIGKILL");
  });

  it("is asked to end before it is made to", async () => {
    const { child, identity } = startNode(
      "process.on('SIGTERM', () => process.exit(7)); setInterval(() => {}, 1000); console.log('up')",
    );
    const ended = once(child, "exit");
    await once(child.stdout, "data");
    expect(await stopProcess(identity)).toBe(true);
    expect((await ended)[0]).toBe(7);
  });

  it("is ended by force when it does not end in time", async () => {
    const { child, identity } = startNode("process.on('SIGTERM', () => {}); setInterval(() => {}, 1000); console.log('up')");
    const ended = once(child, "exit");
    await once(child.stdout, "data");
    await stopProcess(identity, { graceMs: 200 });
    expect((await ended)[1]).toBe("SIGKILL");
    expect(await stopProcess(identity)).toBe(false);
  });
});

describe("a part", () => {
  it("is ready when it says so", async () => {
    const part = startPart({
      name: "clock", args: ["-e", "process.send('ready'); setInterval(() => {}, 1000)"], env: process.env, announces: true,
    });
    await part.ready;
    await part.stop();
    expect(await part.ended).toBe("signal SIGTERM");
  });

  it("that ends before it is ready fails with a sentence that names its log", async () => {
    const log = join(makeFolder(), "clock.log");
    const part = startPart({ name: "clock", args: ["-e", "process.exit(3)"], env: process.env, log, announces: true });
    await expect(part.ready).rejects.toThrow(`The clock ended at once (code 3): the reason stands at the end of ${log}.`);
  });

  it("ends when the command that started it is ended by force", async () => {
    const starter = `
      import { startPart } from ${JSON.stringify(resolve("infra/lib/part.mjs"))};
      const args = ["--import", ${JSON.stringify(leaveWithParent)}, "-e", "setInterval(() => {}, 1000); process.send('ready')"];
      const part = startPart({ name: "clock", args, env: process.env, announces: true });
      await part.ready;
      console.log(part.pid);
      setInterval(() => {}, 1000);
    `;
    const child = spawn(process.execPath, ["--input-type=module", "-e", starter], { stdio: ["ignore", "pipe", "inherit"] });
    const [line] = await once(child.stdout, "data");
    const part = identify(Number(String(line)))!;
    expect(isAlive(part)).toBe(true);
    child.kill("SIGKILL");
    await expect.poll(() => isAlive(part), { timeout: 5_000 }).toBe(false);
  });
});
