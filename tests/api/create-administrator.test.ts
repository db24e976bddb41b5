import { spawn } from "node:child_process";
import { once } from "node:events";
import { fileURLToPath } from "node:url";
import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { everyCategory, permissionsOf } from "@shared/contract/permissions";
import { AuditEntryEntity, PersonEntity } from "../../server/features/accounts";
import { ChainEntity, defaultChain } from "../../server/features/chain";
import { mayUseModels } from "../../server/features/drivers/drivers.policy";
import { startTestApp, type TestApp } from "../support/test-app";

const script = fileURLToPath(new URL("../../server/features/accounts/create-administrator.ts", import.meta.url));
let test: TestApp;

beforeAll(async () => {
  test = await startTestApp();
});
afterAll(() => test.stop());

/** Runs the command as a person would, on the test's database. */
async function run(...given: string[]) {
  const variables = Object.entries(test.services.environment).map(([name, value]) => [name, String(value)]);
  const child = spawn(process.execPath, ["--import", "tsx", script, ...given], {
    env: { PATH: process.env.PATH, ...Object.fromEntries(variables) },
  });
  let output = "";
  let errors = "";
  child.stdout.setEncoding("utf8").on("data", (text: string) => (output += text));
  child.stderr.setEncoding("utf8").on("data", (text: string) => (errors += text));
  const [code] = await once(child, "close");
  return { code, output, errors };
}

describe("the command that creates an administrator", { timeout: 120_000 }, () => {
  it("creates the person and the chain, and prints a password that has to be replaced", async () => {
    const { code, output } = await run("Ada@Chain.example");
    expect(code).toBe(0);
    const password = output.trim().split("\n").at(-1) ?? "";
    expect(password).toMatch(/^[\w-]{16}$/);
    const agent = request.agent(test.app);
    const { body } = await agent.post("/api/session").send({ email: "ada@chain.example", password }).expect(200);
    expect(body.person).toMatchObject({
      email: "ada@chain.example",
      roles: ["administrator"],
      mustChangePassword: true,
    });
    await agent.put("/api/session/password").send({ current: password, next: "a password of my own" }).expect(204);
    expect((await agent.get("/api/chain").expect(200)).body).toEqual(defaultChain);
    const entries = await test.services.orm.em.fork().find(AuditEntryEntity, { action: "person.created" });
    expect(entries).toMatchObject([{ person: null, subjectId: body.person.id, detail: { roles: ["administrator"] } }]);
  });

  it("gives the roles asked for besides, so that one person can begin: with every category where they manage some", async () => {
    const { code, output } = await run("oda@chain.example", "--roles", "category-manager, data-admin,planner");
    expect(code).toBe(0);
    expect(output).toContain("Created oda@chain.example (data-admin, planner, category-manager, administrator).");
    const person = await test.services.orm.em.fork().findOneOrFail(PersonEntity, { email: "oda@chain.example" });
    expect(person).toMatchObject({
      roles: ["data-admin", "planner", "category-manager", "administrator"],
      categories: [everyCategory],
    });
    const caller = { permissions: new Set(permissionsOf(person.roles)), categories: person.categories };
    expect(mayUseModels(caller, "drinks, loaded later")).toBe(true);
    expect(mayUseModels({ ...caller, categories: ["dairy"] }, "drinks, loaded later")).toBe(false);
  });

  it("makes nobody of a role that is none or of arguments it does not know", async () => {
    const unknown = await run("ida@chain.example", "--roles", "planner,king");
    expect(unknown).toMatchObject({
      code: 1,
      output: "",
      errors: 'There is no role "king": there are data-admin, planner, category-manager, administrator.\n',
    });
    const second = await run("ida@chain.example", "planner");
    expect(second).toMatchObject({ code: 1, output: "" });
    expect(second.errors).toContain('Give one e-mail address, not also "planner"');
    const option = await run("ida@chain.example", "--role=planner");
    expect(option).toMatchObject({ code: 1, output: "" });
    expect(option.errors).toContain("These arguments cannot be read");
    expect(await test.services.orm.em.fork().count(PersonEntity, { email: "ida@chain.example" })).toBe(0);
  });

  it("changes nothing where the address is taken or none, and says so in a sentence", async () => {
    const em = test.services.orm.em.fork();
    const count = await em.count(PersonEntity);
    await em.nativeUpdate(ChainEntity, {}, { name: "Larkmoor" });
    const taken = await run("ada@chain.example");
    expect(taken).toMatchObject({
      code: 1,
      output: "",
      errors: "There is someone with the address ada@chain.example already.\n",
    });
    const none = await run("ada");
    expect(none).toMatchObject({ code: 1, output: "", errors: "ada is not an e-mail address.\n" });
    const missing = await run();
    expect(missing).toMatchObject({ code: 1, output: "" });
    expect(missing.errors).toContain("Give the administrator's e-mail address");
    expect(await em.count(PersonEntity)).toBe(count);
    expect(await em.count(ChainEntity, { name: "Larkmoor" })).toBe(1);
  });
});
