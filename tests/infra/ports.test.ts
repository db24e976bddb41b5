import { createServer, type AddressInfo, type Server } from "node:net";
import { afterEach, describe, expect, it } from "vitest";
import { checkPort, isPortFree, parsePort, pickPort } from "../../infra/lib/ports.mjs";

const servers: Server[] = [];
afterEach(() => servers.splice(0).forEach((server) => server.close()));

function occupyPort(host = "127.0.0.1"): Promise<number> {
  return new Promise((resolve) => {
    const server = createServer().listen(0, host, () => resolve((server.address() as AddressInfo).port));
    servers.push(server);
  });
}

describe("picking a port", () => {
  it("keeps the remembered one while it is free", async () => {
    expect(await pickPort({ remembered: 23_456, isFree: async () => true })).toBe(23_456);
  });

  it("gives up the remembered one when another program listens there", async () => {
    const busy = await occupyPort();
    const port = await pickPort({ remembered: busy });
    expect(port).not.toBe(busy);
    expect(await isPortFree(port)).toBe(true);
  });

  it("never gives a port that was promised to another part", async () => {
    expect(await pickPort({ remembered: 23_456, taken: [23_456], isFree: async () => true })).not.toBe(23_456);
  });

  it("says so when no port is free", async () => {
    await expect(pickPort({ isFree: async () => false })).rejects.toThrow(
      "No free port found between 20000 and 29999: stop other programs, then start again.",
    );
  });

  it("sees a program that listens on every address of the machine", async () => {
    expect(await isPortFree(await occupyPort("0.0.0.0"))).toBe(false);
  });
});

describe("a port that people ask for", () => {
  it("is the usual one when none is named", () => {
    expect(parsePort(undefined, { name: "PORT", usual: 4310 })).toBe(4310);
    expect(parsePort("", { name: "PORT", usual: 4310 })).toBe(4310);
    expect(parsePort("8080", { name: "PORT", usual: 4310 })).toBe(8080);
  });

  it.each(["0", "65536", "80a", "-1", "4e3", "1.5"])("is refused when it is %s", (text) => {
    expect(() => parsePort(text, { name: "PORT", usual: 4310 })).toThrow(
      `PORT=${text} is not a port: give a whole number from 1 to 65535, such as PORT=4310.`,
    );
  });

  it("is refused when another program has it, with what to type instead", async () => {
    const busy = await occupyPort();
    await expect(checkPort(busy, "PORT", "npm start")).rejects.toThrow(
      `Port ${busy} is used by another program: stop that program, or choose another port with PORT=${busy + 10} npm start.`,
    );
  });
});
