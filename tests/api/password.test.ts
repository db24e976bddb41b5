import { verify } from "@node-rs/argon2";
import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from "vitest";
import request from "supertest";
import { AuditEntryEntity, PersonEntity } from "../../server/features/accounts";
import { hashPassword, passwordFits } from "../../server/features/accounts/passwords";
import { addPerson, bearerOf, password, signedIn } from "../support/people";
import { expectProblem } from "../support/problems";
import { startTestApp, type TestApp } from "../support/test-app";

// Timing it would fail on a busy machine; which hash is verified says the same.
vi.mock(import("@node-rs/argon2"), async (original) => {
  const argon2 = await original();
  return { ...argon2, verify: vi.fn(argon2.verify) };
});

const next = "another password for tests";
let test: TestApp;
let person: { id: string; email: string };
let count = 0;

beforeAll(async () => {
  test = await startTestApp();
});
afterAll(() => test.stop());
beforeEach(async () => {
  count += 1;
  person = await addPerson(test.services, { email: `person${count}@chain.example`, roles: ["planner"] });
});

describe("changing one's password", () => {
  it("makes the new one count, and not the old", async () => {
    const agent = await signedIn(test.app, person.email);
    await agent.put("/api/session/password").send({ current: password, next }).expect(204);
    await request(test.app).post("/api/session").send({ email: person.email, password: next }).expect(200);
    expectProblem(
      await request(test.app).post("/api/session").send({ email: person.email, password }),
      401,
      "wrong-credentials",
    );
    const entries = await test.services.orm.em
      .fork()
      .find(AuditEntryEntity, { subjectId: person.id, action: "password.changed" });
    expect(entries).toHaveLength(1);
    expect(JSON.stringify(entries)).not.toContain(next);
  });

  it("ends all other sessions of the person, and goes on in this one under a new id", async () => {
    const here = await signedIn(test.app, person.email);
    const elsewhere = await signedIn(test.app, person.email);
    const response = await here.put("/api/session/password").send({ current: password, next }).expect(204);
    expect(String(response.headers["set-cookie"])).toContain("shelftide_session=");
    await here.get("/api/session").expect(200);
    expectProblem(await elsewhere.get("/api/session"), 401, "not-signed-in");
  });

  it("opens the product to a person who signed in with a one-time password", async () => {
    const { email } = await addPerson(test.services, {
      email: `new${count}@chain.example`,
      roles: ["planner"],
      mustChangePassword: true,
    });
    const agent = await signedIn(test.app, email);
    const { body } = await agent.get("/api/session").expect(200);
    expect(body.person.mustChangePassword).toBe(true);
    expectProblem(await agent.get("/api/stores"), 403, "password-change-needed");
    await agent.put("/api/session/password").send({ current: password, next }).expect(204);
    await agent.get("/api/stores").expect(200);
  });

  it("needs the current password, and another new one that is long enough", async () => {
    const agent = await signedIn(test.app, person.email);
    const wrong = await agent.put("/api/session/password").send({ current: "not the password", next });
    expectProblem(wrong, 422, "wrong-password");
    expect(wrong.body.errors).toEqual([{ path: "current", message: "The current password is wrong." }]);
    expectProblem(
      await agent.put("/api/session/password").send({ current: password, next: password }),
      422,
      "same-password",
    );
    const short = await agent.put("/api/session/password").send({ current: password, next: "short" });
    expectProblem(short, 422, "invalid-request");
    expect(short.body.errors).toEqual([{ path: "next", message: "A password has at least 12 characters." }]);
    await agent.get("/api/session").expect(200);
  });

  it("is not for access tokens", async () => {
    const bearer = await bearerOf(test.app, test.services, ["data-admin"]);
    expectProblem(
      await request(test.app)
        .put("/api/session/password")
        .set("Authorization", bearer)
        .send({ current: password, next }),
      403,
      "session-needed",
    );
  });
});

describe("a password", () => {
  it("is kept as argon2id with 46 MiB and one pass, never as itself", async () => {
    const { passwordHash } = await test.services.orm.em
      .fork()
      .findOneOrFail(PersonEntity, { id: person.id }, { populate: ["passwordHash"] });
    expect(passwordHash.unwrap()).toMatch(/^\$argon2id\$v=19\$m=47104,t=1,p=1\$/);
    expect(passwordHash.unwrap()).not.toBe(await hashPassword(password));
  });

  it("is the same however a keyboard composes its letters", async () => {
    const hash = await hashPassword("cr\u00e8me br\u00fbl\u00e9e");
    expect(await passwordFits("cre\u0300me bru\u0302le\u0301e", hash)).toBe(true);
    expect(await passwordFits("creme brulee", hash)).toBe(false);
  });

  it("is checked just as hard for an address that nobody has, so that the time tells nothing", async () => {
    vi.mocked(verify).mockClear();
    const hash = await hashPassword(password);
    expect(await passwordFits("not the password", hash)).toBe(false);
    expect(await passwordFits("not the password", undefined)).toBe(false);
    const [known, unknown] = vi.mocked(verify).mock.calls.map(([checked]) => String(checked));
    expect(unknown).not.toBe(known);
    expect(costOf(unknown)).toBe(costOf(known));
  });
});

/** Kind and cost of a hash in its standard text: all before the salt. */
const costOf = (hash: string) => hash.split("$").slice(0, 4).join("$");
