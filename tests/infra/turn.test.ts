import { spawn } from "node:child_process";
import { existsSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { afterEach, describe, expect, it } from "vitest";
import { identify, isAlive } from "../../infra/lib/process-identity.mjs";
import { readTurn, stateOfTurn, takeTurn, type Turn } from "../../infra/lib/turn.mjs";
import { temporaryFolders } from "./temporary-folder";

const makeFolder = temporaryFolders();
const pids: number[] = [];

afterEach(() => {
  for (const pid of pids.splice(0)) {
    if (identify(pid)) process.kill(pid, "SIGKILL");
  }
});

function startSleeper() {
  const child = spawn(process.execPath, ["-e", "setInterval(() => {}, 1000)"], { stdio: "ignore" });
  pids.push(child.pid!);
  return identify(child.pid!)!;
}

const gone = { pid: 2 ** 22 + 1, startedAt: "long ago" };

function fileTurn(folder: string, turn: Partial<Turn>) {
  const whole = { command: "npm start", address: null, owner: gone, launcher: null, children: {}, ...turn };
  writeFileSync(join(folder, "running.json"), JSON.stringify(whole));
}

async function take(folder: string) {
  const lines: string[] = [];
  const turn = await takeTurn({ folder, command: "npm start", say: (line) => lines.push(line) });
  return { turn, lines };
}

describe("taking the turn", () => {
  it("succeeds in a folder that no command uses, and can be given back", async () => {
    const folder = makeFolder();
    const { turn, lines } = await take(folder);
    expect(lines).toEqual([]);
    expect(readTurn(folder)?.owner.pid).toBe(process.pid);
    turn.giveBack();
    expect(existsSync(join(folder, "running.json"))).toBe(false);
  });

  it("is refused while another command is alive, with its address and process", async () => {
    const folder = makeFolder();
    const owner = startSleeper();
    fileTurn(folder, { owner, address: "http://127.0.0.1:4310" });
    await expect(take(folder)).rejects.toThrow(
      `"npm start" is already running here at http://127.0.0.1:4310 (process ${owner.pid}): use that one, ` +
        `or stop it (Ctrl-C in its window, or kill ${owner.pid}), then try again.`,
    );
    expect(isAlive(owner)).toBe(true);
  });

  it("stops what a command left running that was ended by force, and says so", async () => {
    const folder = makeFolder();
    const child = startSleeper();
    fileTurn(folder, { children: { "web process": child } });
    const { lines } = await take(folder);
    expect(isAlive(child)).toBe(false);
    expect(lines).toEqual([`Stopped the web process (process ${child.pid}) that an earlier npm start left running.`]);
  });

  it("never touches a stranger that has since got a child's number", async () => {
    const folder = makeFolder();
    const stranger = startSleeper();
    fileTurn(folder, { children: { worker: { pid: stranger.pid, startedAt: "before" } } });
    const { lines } = await take(folder);
    expect(isAlive(stranger)).toBe(true);
    expect(lines).toEqual([]);
  });

  it("takes over from a command whose npm was ended by force", async () => {
    const folder = makeFolder();
    const owner = startSleeper();
    fileTurn(folder, { owner, launcher: gone });
    const { lines } = await take(folder);
    expect(isAlive(owner)).toBe(false);
    expect(lines).toEqual([`An earlier npm start (process ${owner.pid}) lost the npm that started it: stopping it.`]);
  });

  it("takes a file that was cut short for one that nobody holds", async () => {
    const folder = makeFolder();
    writeFileSync(join(folder, "running.json"), '{"command": "npm st');
    await expect(take(folder)).resolves.toMatchObject({ lines: [] });
  });

  it("goes to one of two commands that come at the same moment", async () => {
    const folder = makeFolder();
    const outcomes = await Promise.allSettled([take(folder), take(folder)]);
    expect(outcomes.map((outcome) => outcome.status).sort()).toEqual(["fulfilled", "rejected"]);
  });
});

describe("the state of a turn", () => {
  const owner = { pid: 10, startedAt: "a" };
  const launcher = { pid: 9, startedAt: "b" };
  const turn = { command: "npm start", address: null, owner, launcher, children: {} };

  it.each([
    { living: [owner, launcher], state: "held" },
    { living: [owner], state: "orphaned" },
    { living: [launcher], state: "left behind" },
  ])("is $state when $living.length of its processes live", ({ living, state }) => {
    expect(stateOfTurn(turn, (identity) => identity !== null && living.includes(identity))).toBe(state);
  });
});
