import { Writable } from "node:stream";
import request from "supertest";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { createApp } from "../../server/app";
import { createLogger } from "../../server/logger";
import { addPerson, password } from "../support/people";
import { startTestApp, type TestApp } from "../support/test-app";

let test: TestApp;
let app: TestApp["app"];
let text = "";

beforeAll(async () => {
  test = await startTestApp();
  const destination = new Writable({
    write(chunk, _encoding, callback) {
      text += String(chunk);
      callback();
    },
  });
  const environment = { ...test.services.environment, NODE_ENV: "production" as const };
  app = createApp({ ...test.services, environment, logger: createLogger("trace", destination) });
});
afterAll(() => test.stop());

describe("the log", () => {
  it("says of each request what was asked, how it went, and the id that its answer named", async () => {
    const response = await request(app).get("/api/health?probe=1").expect(200);
    const line = text
      .split("\n")
      .filter(Boolean)
      .map((entry) => JSON.parse(entry))
      .at(-1);
    expect(line).toMatchObject({
      req: { id: response.headers["x-request-id"], method: "GET", url: "/api/health?probe=1" },
      res: { statusCode: 200 },
      responseTime: expect.any(Number),
    });
  });

  it("holds nothing that could sign anyone in", async () => {
    const { email } = await addPerson(test.services, { roles: ["planner"] });
    const agent = request.agent(app);
    const signIn = await agent.post("/api/session").send({ email, password }).expect(200);
    const cookie = String(signIn.headers["set-cookie"]).split(";")[0]?.split("=")[1] ?? "";
    const { body } = await agent
      .post("/api/tokens")
      .send({ name: "test", permissions: ["read"] })
      .expect(201);
    await request(app).get("/api/session").set("Authorization", `Bearer ${body.token}`).expect(200);
    await request(app)
      .post("/api/session")
      .send({ email, password: `${password} that is wrong` })
      .expect(401);
    await request(app)
      .post("/api/session")
      .set("Content-Type", "application/json")
      .send(`{"password": "${password}`)
      .expect(400);
    expect(text).toContain("/api/tokens");
    for (const secret of [password, cookie, decodeURIComponent(cookie), String(body.token).slice(12)]) {
      expect(secret.length).toBeGreaterThan(10);
      expect(text).not.toContain(secret);
    }
  });
});
