import { readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { describe, expect, it } from "vitest";
import { people } from "../../demo/chain/people";

const folder = fileURLToPath(new URL("../../demo", import.meta.url));

describe("The people of the demo", () => {
  it("are one for each role, by the addresses that the start command prints", () => {
    expect(Object.values(people).flatMap(({ roles }) => roles).sort()).toEqual(
      ["administrator", "category-manager", "data-admin", "planner"],
    );
    for (const [name, { email }] of Object.entries(people)) expect(email).toBe(`${name}@larkmoor.example`);
  });

  it("have e-mail addresses that end in .example, as every address in the demo does", () => {
    const files = readdirSync(folder, { recursive: true, encoding: "utf8" }).filter((name) => /\.(ts|md)$/.test(name));
    const texts = files.map((name) => readFileSync(join(folder, name), "utf8"));
    const addresses = texts.flatMap((text) => text.match(/[\w.+-]+@[\w-]+(\.[\w-]+)+/g) ?? []);
    expect(addresses.length).toBeGreaterThanOrEqual(4);
    expect(addresses.filter((address) => !address.endsWith(".example"))).toEqual([]);
  });
});
