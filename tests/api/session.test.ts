import request from "supertest";
import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import { AuditEntryEntity, PersonEntity } from "../../server/features/accounts";
import { createApp } from "../../server/app";
import { addPerson, password, signedIn } from "../support/people";
import { expectProblem } from "../support/problems";
import { startTestApp, type TestApp } from "../support/test-app";

const minuteMs = 60_000;
const hourMs = 60 * minuteMs;

let test: TestApp;
let now = new Date("2026-06-01T08:00:00Z");
let person: { id: string; email: string };
let count = 0;

beforeAll(async () => {
  test = await startTestApp({ now: () => now });
});
afterAll(() => test.stop());
beforeEach(async () => {
  now = new Date("2026-06-01T08:00:00Z");
  count += 1;
  person = await addPerson(test.services, {
    email: `person${count}@chain.example`,
    name: "Ada",
    roles: ["category-manager"],
    categories: ["tea"],
  });
});

const pass = (ms: number) => {
  now = new Date(now.getTime() + ms);
};
const cookieOf = (response: request.Response) => String(response.headers["set-cookie"]);
const signIn = (credentials: object) => request(test.app).post("/api/session").send(credentials);
const change = (fields: Partial<{ disabledAt: Date }>) =>
  test.services.orm.em.fork().nativeUpdate(PersonEntity, { id: person.id }, fields);

async function auditOf(id: string) {
  const entries = await test.services.orm.em
    .fork()
    .find(AuditEntryEntity, { subjectId: id }, { orderBy: { id: "asc" } });
  return entries.map(({ action, person: by }) => ({ action, by: by?.id ?? null }));
}

async function sessionRow() {
  const { rows } = await test.services.pool.query<{ sid: string; version: string }>(
    "select sid, xmin::text as version from user_session where sess->>'personId' = $1",
    [person.id],
  );
  return rows[0];
}

describe("signing in", () => {
  it("answers who one is and what one may do, and sets a cookie that scripts cannot read", async () => {
    const response = await signIn({ email: person.email, password }).expect(200);
    expect(response.body).toEqual({
      person: {
        id: person.id,
        email: person.email,
        name: "Ada",
        roles: ["category-manager"],
        categories: ["tea"],
        mustChangePassword: false,
      },
      permissions: ["read", "models:fit", "models:use", "scenarios:write", "scenarios:decide"],
      by: "session",
    });
    expect(cookieOf(response)).toMatch(/^shelftide_session=[^;]+; Path=\/; Expires=[^;]+; HttpOnly; SameSite=Lax$/);
  });

  it("sends the cookie over https only where the installation says so", async () => {
    const environment = { ...test.services.environment, SECURE_COOKIES: true, TRUST_PROXY: 1 };
    const app = createApp({ ...test.services, environment });
    const response = await request(app)
      .post("/api/session")
      .set("X-Forwarded-Proto", "https")
      .send({ email: person.email, password })
      .expect(200);
    expect(cookieOf(response)).toContain("; Secure");
    const plain = await request(app).post("/api/session").send({ email: person.email, password });
    expect(plain.headers["set-cookie"]).toBeUndefined();
  });

  it("knows an address however it is written", async () => {
    await signIn({ email: `  ${person.email.toUpperCase()} `, password }).expect(200);
  });

  it("gives a new session id, and ends the one before", async () => {
    const agent = await signedIn(test.app, person.email);
    const before = await sessionRow();
    await agent.post("/api/session").send({ email: person.email, password }).expect(200);
    const after = await sessionRow();
    expect(after?.sid).not.toBe(before?.sid);
    const { rows } = await test.services.pool.query("select 1 from user_session where sid = $1", [before?.sid]);
    expect(rows).toEqual([]);
  });

  it("does not take up a session id that was planted", async () => {
    const response = await request(test.app)
      .post("/api/session")
      .set("Cookie", "shelftide_session=s%3Aplanted.bm90IGEgc2lnbmF0dXJl")
      .send({ email: person.email, password });
    expect(response.status).toBe(200);
    expect(cookieOf(response)).not.toContain("planted");
  });

  it("answers the same to a wrong password, an unknown address and a disabled person", async () => {
    const wrong = await signIn({ email: person.email, password: "not the password" });
    const unknown = await signIn({ email: "nobody@chain.example", password });
    await change({ disabledAt: now });
    const disabled = await signIn({ email: person.email, password });
    for (const response of [wrong, unknown, disabled]) {
      expectProblem(response, 401, "wrong-credentials");
      expect({ ...response.body, requestId: "" }).toEqual({ ...wrong.body, requestId: "" });
      expect(response.headers["set-cookie"]).toBeUndefined();
    }
    expect(await auditOf(person.id)).toEqual([
      { action: "session.refused", by: null },
      { action: "session.refused", by: null },
    ]);
  });

  it("refuses what is no address and password", async () => {
    expectProblem(await signIn({ email: person.email }), 422, "invalid-request");
    expectProblem(await signIn({ email: { $ne: null }, password: { $ne: null } }), 422, "invalid-request");
  });
});

describe("a session", () => {
  it("tells who is signed in, until they sign out", async () => {
    const agent = await signedIn(test.app, person.email);
    const { body } = await agent.get("/api/session").expect(200);
    expect(body.person.email).toBe(person.email);
    await agent.delete("/api/session").expect(204);
    expectProblem(await agent.get("/api/session"), 401, "not-signed-in");
    expect(await sessionRow()).toBeUndefined();
    expect(await auditOf(person.id)).toEqual([
      { action: "session.began", by: person.id },
      { action: "session.ended", by: person.id },
    ]);
  });

  it("stays ended after a sign-out where a request from before is answered later", async () => {
    const agent = await signedIn(test.app, person.email);
    // A minute later the next request would note when it was last seen.
    pass(2 * minuteMs);
    const client = await test.services.pool.connect();
    try {
      // Holds the request back between its look at the session and its answer.
      await client.query("begin");
      await client.query("lock table chain");
      const slow = agent.get("/api/chain").then((response) => response.status);
      await expect
        .poll(
          async () =>
            (
              await test.services.pool.query(
                "select 1 from pg_stat_activity where wait_event_type = 'Lock' and datname = current_database()",
              )
            ).rowCount,
        )
        .toBe(1);
      await agent.delete("/api/session").expect(204);
      await client.query("rollback");
      await slow;
    } finally {
      client.release();
    }
    expect(await sessionRow()).toBeUndefined();
  });

  it("lets one sign out without being signed in", async () => {
    await request(test.app).delete("/api/session").expect(204);
  });

  it("ends eight hours after the last request", async () => {
    const agent = await signedIn(test.app, person.email);
    for (let request = 0; request < 3; request += 1) {
      pass(7 * hourMs + 58 * minuteMs);
      await agent.get("/api/session").expect(200);
    }
    pass(8 * hourMs + minuteMs);
    expectProblem(await agent.get("/api/session"), 401, "not-signed-in");
    expect(await sessionRow()).toBeUndefined();
  });

  it("ends seven days after sign-in, however busy", async () => {
    const agent = await signedIn(test.app, person.email);
    for (let hours = 7; hours < 7 * 24; hours += 7) {
      pass(7 * hourMs);
      await agent.get("/api/session").expect(200);
    }
    pass(7 * hourMs);
    expectProblem(await agent.get("/api/session"), 401, "not-signed-in");
  });

  it("is written at most once a minute by those who only read", async () => {
    const agent = await signedIn(test.app, person.email);
    const made = await sessionRow();
    for (let request = 0; request < 5; request += 1) await agent.get("/api/session").expect(200);
    expect(await sessionRow()).toEqual(made);
    pass(minuteMs);
    await agent.get("/api/session").expect(200);
    const later = await sessionRow();
    expect(later?.version).not.toBe(made?.version);
    await agent.get("/api/session").expect(200);
    expect(await sessionRow()).toEqual(later);
  });

  it("ends at once where the person is disabled", async () => {
    const agent = await signedIn(test.app, person.email);
    await change({ disabledAt: now });
    expectProblem(await agent.get("/api/session"), 401, "not-signed-in");
  });

  it("ends where its cookie was changed", async () => {
    const response = await signIn({ email: person.email, password });
    const [cookie = ""] = cookieOf(response).split(";");
    await request(test.app).get("/api/session").set("Cookie", cookie).expect(200);
    const forged = cookie.replace(/.{4}$/, "AAAA");
    expectProblem(await request(test.app).get("/api/session").set("Cookie", forged), 401, "not-signed-in");
  });
});
