import request from "supertest";
import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from "vitest";
import { createApp } from "../../server/app";
import { networkOf } from "../../server/http/network-of";
import { guardAgainstGuessing } from "../../server/http/throttle";
import { addPerson, password } from "../support/people";
import { expectProblem } from "../support/problems";
import { startTestApp, type TestApp } from "../support/test-app";

let test: TestApp;
let app: TestApp["app"];
let count = 0;
let person: { email: string };

beforeAll(async () => {
  test = await startTestApp();
  // So that a test can speak from any network address.
  app = createApp({ ...test.services, environment: { ...test.services.environment, TRUST_PROXY: 1 } });
});
afterAll(() => test.stop());
beforeEach(async () => {
  count += 1;
  person = await addPerson(test.services, { email: `person${count}@chain.example`, roles: ["planner"] });
  await test.services.pool.query("delete from rate_limits");
});

const signIn = (email: string, withPassword: string, from = "192.0.2.1", to = app) =>
  request(to).post("/api/session").set("X-Forwarded-For", from).send({ email, password: withPassword });

function expectWait(response: request.Response, atMostSeconds: number) {
  expectProblem(response, 429, "too-many-requests");
  const seconds = Number(response.headers["retry-after"]);
  expect(seconds).toBeGreaterThan(0);
  expect(seconds).toBeLessThanOrEqual(atMostSeconds);
}

describe("guessing a password", () => {
  it("is stopped after ten wrong ones for an account, wherever they come from, even for the right one", async () => {
    for (let guess = 1; guess <= 10; guess += 1)
      expectProblem(await signIn(person.email, "wrong", `192.0.2.${guess}`), 401, "wrong-credentials");
    const response = await signIn(person.email.toUpperCase(), password, "192.0.2.99");
    expectWait(response, 900);
    expect(Number(response.headers["retry-after"])).toBeGreaterThan(800);
    const other = await addPerson(test.services, { email: `other${count}@chain.example`, roles: ["planner"] });
    await signIn(other.email, password, "192.0.2.99").expect(200);
  });

  it("is stopped the same way for an account that does not exist", async () => {
    for (let guess = 1; guess <= 10; guess += 1)
      expectProblem(await signIn("nobody@chain.example", "wrong", `192.0.2.${guess}`), 401, "wrong-credentials");
    expectWait(await signIn("nobody@chain.example", "wrong", "192.0.2.99"), 900);
  });

  it("is stopped after thirty wrong ones from a network address, whomever they try", { timeout: 60_000 }, async () => {
    for (let guess = 1; guess <= 30; guess += 1)
      expectProblem(await signIn(`person-${guess}@elsewhere.example`, "wrong"), 401, "wrong-credentials");
    expectWait(await signIn(person.email, password), 900);
    await signIn(person.email, password, "198.51.100.7").expect(200);
  });

  it("counts guesses that are made at the same time", async () => {
    const responses = await Promise.all(Array.from({ length: 20 }, () => signIn(person.email, "wrong")));
    const statuses = responses.map(({ status }) => status).sort();
    expect(statuses).toEqual([...Array.from({ length: 10 }, () => 401), ...Array.from({ length: 10 }, () => 429)]);
  });

  it("begins anew after a right one, which is not counted itself", async () => {
    for (let round = 0; round < 2; round += 1) {
      for (let guess = 1; guess <= 9; guess += 1) await signIn(person.email, "wrong", `192.0.2.${guess}`).expect(401);
      await signIn(person.email, password, "192.0.2.50").expect(200);
    }
    const { rows } = await test.services.pool.query(
      "select points from rate_limits where key = 'address-guesses:192.0.2.50'",
    );
    expect(rows).toEqual([{ points: 0 }]);
  });

  it("is counted for all web processes together", async () => {
    const another = createApp({ ...test.services, environment: { ...test.services.environment, TRUST_PROXY: 1 } });
    for (let guess = 1; guess <= 10; guess += 1)
      await signIn(person.email, "wrong", `192.0.2.${guess}`, guess % 2 ? app : another).expect(401);
    expectWait(await signIn(person.email, password, "192.0.2.99", another), 900);
    expectWait(await signIn(person.email, password, "192.0.2.99"), 900);
  });

  it("is stopped for the current password too, where a session was left open", async () => {
    const agent = request.agent(test.app);
    await agent.post("/api/session").send({ email: person.email, password }).expect(200);
    const guess = () => agent.put("/api/session/password").send({ current: "wrong", next: "a long enough password" });
    for (let count = 1; count <= 10; count += 1) expectProblem(await guess(), 422, "wrong-password");
    expectWait(await guess(), 900);
  });
});

describe("counters", () => {
  it("limit sign-ins from one address, right or wrong, to sixty a minute", { timeout: 60_000 }, async () => {
    const responses = [];
    for (let round = 0; round < 61; round += 1) responses.push(await request(test.app).post("/api/session").send({}));
    expect(responses.slice(0, 60).every(({ status }) => status === 422)).toBe(true);
    const last = responses.at(-1);
    if (last) expectWait(last, 60);
  });

  it("keep no readable address of a person", async () => {
    await signIn(person.email, "wrong").expect(401);
    const { rows } = await test.services.pool.query<{ key: string }>("select key from rate_limits");
    expect(rows.length).toBeGreaterThan(0);
    expect(JSON.stringify(rows)).not.toContain(person.email);
  });

  it("are removed an hour after they ran out", async () => {
    const longAgo = Date.now() - 3_700_000;
    const insert = "insert into rate_limits (key, points, expire) values ($1, 1, $2)";
    await test.services.pool.query(insert, ["write:old", longAgo]);
    await test.services.pool.query(insert, ["write:fresh", Date.now()]);
    vi.useFakeTimers({ toFake: ["setTimeout", "clearTimeout"] });
    try {
      // New services have counters of their own, which begin to tidy up now.
      const services = { ...test.services };
      await guardAgainstGuessing(services, { account: "a@chain.example", address: "192.0.2.1" });
      await vi.advanceTimersByTimeAsync(300_000);
    } finally {
      vi.useRealTimers();
    }
    const left = async () =>
      (await test.services.pool.query<{ key: string }>("select key from rate_limits where key like 'write:%'")).rows;
    await expect.poll(left).toEqual([{ key: "write:fresh" }]);
  });
});

describe("the network that is counted by", () => {
  it("is an IPv4 address, however it is written", () => {
    expect(networkOf("192.0.2.1")).toBe("192.0.2.1");
    expect(networkOf("::ffff:192.0.2.1")).toBe("192.0.2.1");
  });

  it("is the first half of an IPv6 address, however it is written", () => {
    for (const address of ["2001:db8:1:2::1", "2001:0DB8:0001:0002:ffff:ffff:ffff:ffff", "2001:db8:1:2:3::%eth0"]) {
      expect(networkOf(address)).toBe("2001:db8:1:2::/64");
    }
    expect(networkOf("::1")).toBe("0:0:0:0::/64");
    expect(networkOf("2001:db8::1")).toBe("2001:db8:0:0::/64");
    expect(networkOf("2001:db8:1:2:3:4:5::")).toBe("2001:db8:1:2::/64");
  });

  it("is the text itself where it is no address", () => {
    expect(networkOf("unknown")).toBe("unknown");
  });
});
