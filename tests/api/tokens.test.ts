import request from "supertest";
import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import { AccessTokenEntity, AuditEntryEntity, PersonEntity } from "../../server/features/accounts";
import type { Permission, Role } from "@shared/contract/permissions";
import { addPerson, signedIn } from "../support/people";
import { expectProblem } from "../support/problems";
import { startTestApp, type TestApp } from "../support/test-app";

const dayMs = 86_400_000;
let test: TestApp;
let now = new Date("2026-06-01T08:00:00Z");
let count = 0;

beforeAll(async () => {
  test = await startTestApp({ now: () => now });
});
afterAll(() => test.stop());
beforeEach(() => {
  now = new Date("2026-06-01T08:00:00Z");
});

async function newPerson(roles: Role[]) {
  count += 1;
  const person = await addPerson(test.services, { email: `person${count}@chain.example`, roles });
  return { ...person, agent: await signedIn(test.app, person.email) };
}

async function newToken(agent: Awaited<ReturnType<typeof signedIn>>, permissions: Permission[], more: object = {}) {
  const { body } = await agent
    .post("/api/tokens")
    .send({ name: "weekly upload", permissions, ...more })
    .expect(201);
  return { id: String(body.id), token: String(body.token), body };
}

const withToken = (token: string) => ({
  get: (path: string) => request(test.app).get(path).set("Authorization", `Bearer ${token}`),
  post: (path: string) => request(test.app).post(path).set("Authorization", `Bearer ${token}`),
  put: (path: string) => request(test.app).put(path).set("Authorization", `Bearer ${token}`),
  delete: (path: string) => request(test.app).delete(path).set("Authorization", `Bearer ${token}`),
});

describe("making an access token", () => {
  it("shows it once, and keeps its hash and first characters only", async () => {
    const { agent, id: personId } = await newPerson(["data-admin"]);
    const { id, token, body } = await newToken(agent, ["read", "extracts:write"]);
    expect(token).toMatch(/^shelf_[\w-]{43}$/);
    expect(body).toEqual({
      id,
      token,
      name: "weekly upload",
      prefix: token.slice(0, 12),
      permissions: ["read", "extracts:write"],
      createdAt: "2026-06-01T08:00:00.000Z",
      expiresAt: "2026-08-30T08:00:00.000Z",
      lastUsedAt: null,
      revokedAt: null,
    });
    const list = await agent.get("/api/tokens").expect(200);
    expect(list.body.items).toEqual([{ ...body, token: undefined }]);
    const row = await test.services.orm.em.fork().findOneOrFail(AccessTokenEntity, { id });
    expect(JSON.stringify({ ...row })).not.toContain(token.slice(12));
    expect(row.hash).toMatch(/^[0-9a-f]{64}$/);
    const [entry] = await test.services.orm.em.fork().find(AuditEntryEntity, { subjectKind: "token", subjectId: id });
    expect(entry).toMatchObject({
      action: "token.made",
      person: { id: personId },
      detail: { name: "weekly upload", permissions: ["read", "extracts:write"] },
    });
    expect(JSON.stringify({ ...entry })).not.toContain(token.slice(12));
  });

  it("is refused for more than one's own rights, naming what is too much", async () => {
    const { agent } = await newPerson(["planner"]);
    const response = await agent
      .post("/api/tokens")
      .send({ name: "x", permissions: ["read", "extracts:write", "people:manage"] });
    expectProblem(response, 403, "more-than-own-rights");
    expect(response.body.detail).toContain("extracts:write, people:manage");
  });

  it("is refused to a token, which could outlive itself otherwise", async () => {
    const { agent } = await newPerson(["administrator"]);
    const { token } = await newToken(agent, ["read", "people:manage"]);
    expectProblem(
      await withToken(token)
        .post("/api/tokens")
        .send({ name: "x", permissions: ["read"] }),
      403,
      "session-needed",
    );
  });

  it("is refused without a name, a permission that exists, or an end", async () => {
    const { agent } = await newPerson(["planner"]);
    for (const wrong of [
      { name: " " },
      { permissions: [] },
      { permissions: ["everything"] },
      { expiresInDays: 0 },
      { expiresInDays: 1000 },
    ]) {
      expectProblem(
        await agent.post("/api/tokens").send({ name: "x", permissions: ["read"], ...wrong }),
        422,
        "invalid-request",
      );
    }
    expectProblem(
      await request(test.app)
        .post("/api/tokens")
        .send({ name: "x", permissions: ["read"] }),
      401,
      "not-signed-in",
    );
  });
});

describe("calling by an access token", () => {
  it("works without a cookie, says so, and notes when it was last used", async () => {
    const { agent } = await newPerson(["data-admin"]);
    const { token, id } = await newToken(agent, ["read"]);
    const { body } = await withToken(token).get("/api/session").expect(200);
    expect(body).toMatchObject({ by: "token", permissions: ["read"] });
    const { body: list } = await agent.get("/api/tokens").expect(200);
    expect(list.items[0]).toMatchObject({ id, lastUsedAt: "2026-06-01T08:00:00.000Z" });
  });

  it("does no more than the token may, though its maker may", async () => {
    const { agent } = await newPerson(["administrator"]);
    const { token } = await newToken(agent, ["read"]);
    expectProblem(await withToken(token).put("/api/chain").send({ name: "New name" }), 403, "not-allowed");
  });

  it("does no more than its maker may today", async () => {
    const { agent, id } = await newPerson(["data-admin", "administrator"]);
    const { token } = await newToken(agent, ["read", "extracts:write", "settings:manage"]);
    await test.services.orm.em.fork().nativeUpdate(PersonEntity, { id }, { roles: ["data-admin"] });
    const { body } = await withToken(token).get("/api/session").expect(200);
    expect(body.permissions).toEqual(["read", "extracts:write"]);
    expectProblem(await withToken(token).put("/api/chain").send({ name: "New name" }), 403, "not-allowed");
  });

  it("ends when the token expires, or its maker is disabled or has to change the password", async () => {
    const { agent, id } = await newPerson(["planner"]);
    const { token } = await newToken(agent, ["read"], { expiresInDays: 2 });
    now = new Date(now.getTime() + 2 * dayMs - 1000);
    await withToken(token).get("/api/session").expect(200);
    const people = test.services.orm.em.fork();
    await people.nativeUpdate(PersonEntity, { id }, { mustChangePassword: true });
    expectProblem(await withToken(token).get("/api/stores"), 403, "password-change-needed");
    await people.nativeUpdate(PersonEntity, { id }, { mustChangePassword: false, disabledAt: now });
    expectProblem(await withToken(token).get("/api/session"), 401, "not-signed-in");
    await people.nativeUpdate(PersonEntity, { id }, { disabledAt: null });
    now = new Date(now.getTime() + 1000);
    expectProblem(await withToken(token).get("/api/session"), 401, "not-signed-in");
  });

  it("is refused for anything that is no token of ours, even from a browser that is signed in", async () => {
    const { agent } = await newPerson(["planner"]);
    const { token } = await newToken(agent, ["read"]);
    for (const header of [
      "Bearer",
      "Bearer x",
      `Basic ${token}`,
      `Bearer ${token}x`,
      `Bearer shelf_${"A".repeat(43)}`,
      token,
      `Bearer ${token} ${token}`,
    ]) {
      const response = await agent.get("/api/session").set("Authorization", header);
      expectProblem(response, 401, "not-signed-in");
      expect(response.headers["www-authenticate"]).toBe("Bearer");
    }
  });
});

describe("revoking an access token", () => {
  it("ends it at once, for its maker", async () => {
    const { agent, id: personId } = await newPerson(["planner"]);
    const { token, id } = await newToken(agent, ["read"]);
    await agent.delete(`/api/tokens/${id}`).expect(204);
    await agent.delete(`/api/tokens/${id}`).expect(204);
    expectProblem(await withToken(token).get("/api/session"), 401, "not-signed-in");
    const entries = await test.services.orm.em
      .fork()
      .find(AuditEntryEntity, { subjectId: id, action: "token.revoked" });
    expect(entries.map(({ person }) => person?.id)).toEqual([personId]);
    const { body } = await agent.get("/api/tokens").expect(200);
    expect(body.items[0].revokedAt).toBe("2026-06-01T08:00:00.000Z");
  });

  it("is open to administrators for everyone's, and to nobody else", async () => {
    const { agent } = await newPerson(["planner"]);
    const { token, id } = await newToken(agent, ["read"]);
    const other = await newPerson(["planner", "data-admin", "category-manager"]);
    expectProblem(await other.agent.delete(`/api/tokens/${id}`), 404, "not-found");
    await withToken(token).get("/api/session").expect(200);
    const administrator = await newPerson(["administrator"]);
    await administrator.agent.delete(`/api/tokens/${id}`).expect(204);
    expectProblem(await withToken(token).get("/api/session"), 401, "not-signed-in");
  });

  it("lets a token end itself, and no other of its maker's", async () => {
    const { agent } = await newPerson(["planner"]);
    const first = await newToken(agent, ["read"]);
    const second = await newToken(agent, ["read"]);
    expectProblem(await withToken(first.token).delete(`/api/tokens/${second.id}`), 404, "not-found");
    await withToken(first.token).delete(`/api/tokens/${first.id}`).expect(204);
    await withToken(second.token).get("/api/session").expect(200);
  });
});
