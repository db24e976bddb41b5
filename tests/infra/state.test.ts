import { readFileSync, statSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { newState, readState, writeState } from "../../infra/lib/state.mjs";
import { temporaryFolders } from "./temporary-folder";

const makeFolder = temporaryFolders();

describe("the state of an installation", () => {
  it("comes back as it was written", () => {
    const folder = makeFolder();
    const state = { ...newState(), ports: { database: 20_001, mailPage: 20_002 }, demo: "loaded" as const };
    writeState(folder, state);
    expect(readState(folder)).toEqual(state);
  });

  it("has secrets of its own in every installation", () => {
    const [one, other] = [newState(), newState()];
    expect(one.sessionSecret).toMatch(/^[0-9a-f]{64}$/);
    expect(one.sessionSecret).not.toBe(other.sessionSecret);
    expect(one.databasePassword).not.toBe(other.databasePassword);
  });

  it("is readable by its owner alone", () => {
    const folder = makeFolder();
    writeState(folder, newState());
    expect(statSync(join(folder, "state.json")).mode & 0o777).toBe(0o600);
  });

  it("is new, and not yet written, in an empty folder", () => {
    const folder = makeFolder();
    expect(readState(folder)).toMatchObject({ version: 1, ports: {}, demo: null });
    expect(() => readFileSync(join(folder, "state.json"))).toThrow("ENOENT");
  });

  it.each([
    ["cut short", '{"version": 1, "ports": {'],
    ["empty", ""],
    ["of a later version", JSON.stringify({ ...newState(), version: 2 })],
    ["without its password", JSON.stringify({ ...newState(), databasePassword: undefined })],
    ["with a port that is none", JSON.stringify({ ...newState(), ports: { database: "x" } })],
  ])("is refused when it is %s, and left as it is", (_how, text) => {
    const folder = makeFolder();
    const path = join(folder, "state.json");
    writeFileSync(path, text);
    expect(() => readState(folder)).toThrow(
      `${path} cannot be read as an installation's state: put it back from a copy, ` +
        `or move the folder ${folder} away to begin anew.`,
    );
    expect(readFileSync(path, "utf8")).toBe(text);
  });
});
