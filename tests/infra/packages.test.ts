import { describe, expect, it } from "vitest";
import { packagesFit } from "../../infra/lib/packages.mjs";

const react = { version: "19.3.1", integrity: "sha512-a" };
const vitest = { version: "4.1.12", integrity: "sha512-b", dev: true };
const otherSystem = { version: "1.0.0", integrity: "sha512-c", optional: true };
const wanted = {
  packages: { "": { version: "0.1.0" }, "node_modules/react": react, "node_modules/vitest": vitest, "node_modules/x": otherSystem },
};

describe("the installed packages", () => {
  it("fit when each is the lock file's, those for other systems aside", () => {
    const installed = { packages: { "node_modules/react": react, "node_modules/vitest": vitest } };
    expect(packagesFit({ wanted, installed, withTools: true })).toBe(true);
  });

  it("fit for running, not for developing, without the developers' tools", () => {
    const installed = { packages: { "node_modules/react": react } };
    expect(packagesFit({ wanted, installed, withTools: false })).toBe(true);
    expect(packagesFit({ wanted, installed, withTools: true })).toBe(false);
  });

  it.each([
    ["another version", { ...react, version: "19.3.0" }],
    ["another content", { ...react, integrity: "sha512-z" }],
  ])("do not fit with %s of one", (_what, found) => {
    const installed = { packages: { "node_modules/react": found, "node_modules/vitest": vitest } };
    expect(packagesFit({ wanted, installed, withTools: true })).toBe(false);
  });

  it("do not fit when one is missing", () => {
    expect(packagesFit({ wanted, installed: { packages: { "node_modules/vitest": vitest } }, withTools: false })).toBe(false);
    expect(packagesFit({ wanted, installed: {}, withTools: false })).toBe(false);
  });
});
