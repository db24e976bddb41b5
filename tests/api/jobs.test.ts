import { once } from "node:events";
import { createServer, request as httpRequest, type IncomingMessage, type Server } from "node:http";
import type { AddressInfo } from "node:net";
import request from "supertest";
import { afterAll, beforeAll, describe, expect, it, vi } from "vitest";
import { jobSchema, type Job } from "@shared/contract/jobs";
import { AuditEntryEntity, PersonEntity } from "../../server/features/accounts";
import { createApp } from "../../server/app";
import { mostWatchers, watchOf } from "../../server/features/jobs/job-watch";
import { enqueue, hasEnded, waitForJob } from "../support/jobs";
import { bearerOf, signedInAs } from "../support/people";
import { expectProblem } from "../support/problems";
import { startTestApp, type TestApp } from "../support/test-app";
import { countingJob, createTrialMarks, marksOf, trialJobs } from "../support/trial-jobs";

const unknown = "00000000-0000-4000-8000-000000000000";
let test: TestApp;
let server: Server;
let agent: Awaited<ReturnType<typeof signedInAs>>;
let bearer: string;
let personId: string;

beforeAll(async () => {
  test = await startTestApp();
  await createTrialMarks(test.services);
  await test.services.queue.work(trialJobs, test.services);
  agent = await signedInAs(test.app, test.services, ["planner"]);
  bearer = await bearerOf(test.app, test.services, ["data-admin"]);
  personId = (await test.services.orm.em.fork().findOneOrFail(PersonEntity, { email: "planner@chain.example" })).id;
  server = createServer(test.app).listen(0, "127.0.0.1");
  await once(server, "listening");
});
afterAll(async () => {
  await test.stop();
  server.closeAllConnections();
  server.close();
});

const count = (steps: number, stepMs: number, by: string | null = personId) =>
  enqueue(test.services, countingJob, { steps, stepMs }, { personId: by });

/** Follows a job as a browser would; the answer's text comes in as it is sent. */
async function follow(id: string, on = server) {
  const { port } = on.address() as AddressInfo;
  const sent = httpRequest({
    host: "127.0.0.1",
    port,
    path: `/api/jobs/${id}/events`,
    headers: { authorization: bearer },
  }).end();
  const [response] = (await once(sent, "response")) as [IncomingMessage];
  let text = "";
  response.setEncoding("utf8").on("data", (chunk: string) => (text += chunk));
  const ended = new Promise<void>((resolve) => response.on("close", resolve));
  return { sent, response, ended, text: () => text };
}

function jobsIn(text: string): Job[] {
  return text
    .split("\n\n")
    .filter((block) => block.startsWith("data: "))
    .map((block) => jobSchema.parse(JSON.parse(block.slice("data: ".length))));
}

describe("a job's state", () => {
  it("is read by everyone who is signed in", async () => {
    const id = await count(1, 1);
    await waitForJob(test.services, id, hasEnded);
    const { body } = await agent.get(`/api/jobs/${id}`).expect(200);
    expect(jobSchema.strict().parse(body)).toMatchObject({
      id,
      kind: "trial.counting",
      state: "succeeded",
      progress: { done: 1, total: 1, message: "Step 1" },
      result: { counted: 1 },
      error: null,
      attempt: 1,
    });
    expectProblem(await request(test.app).get(`/api/jobs/${id}`), 401, "not-signed-in");
    expectProblem(await agent.get(`/api/jobs/${unknown}`), 404, "not-found");
  });
});

describe("following a job", () => {
  it("tells each change as it happens, and ends with the job", async () => {
    const id = await count(8, 150);
    const stream = await follow(id);
    expect(stream.response.headers).toMatchObject({
      "content-type": "text/event-stream; charset=utf-8",
      "cache-control": "no-cache, no-transform",
    });
    await stream.ended;
    const jobs = jobsIn(stream.text());
    expect(stream.text()).toMatch(/^retry: 1000\n\n/);
    expect(jobs.at(-1)).toMatchObject({ id, state: "succeeded", progress: { done: 8, total: 8 } });
    const steps = jobs.map(({ progress }) => progress.done);
    expect(steps).toEqual([...steps].sort((first, second) => first - second));
    expect(new Set(steps).size).toBeGreaterThan(2);
    expect(new Set(jobs.map((job) => JSON.stringify(job))).size).toBe(jobs.length);
  });

  it("tells once how an ended job stands, and ends", async () => {
    const id = await count(1, 1);
    await waitForJob(test.services, id, hasEnded);
    const stream = await follow(id);
    await stream.ended;
    expect(jobsIn(stream.text())).toHaveLength(1);
  });

  it("stops when the browser goes away, and asks the database no more", async () => {
    const id = await count(40, 150);
    const stream = await follow(id);
    await expect.poll(() => jobsIn(stream.text()).length).toBeGreaterThan(0);
    stream.sent.destroy();
    await stream.ended;
    await expect.poll(() => connectionsOf(server)).toBe(0);
    await agent.post(`/api/jobs/${id}/cancel`).expect(200);
    await waitForJob(test.services, id, (job) => hasEnded(job) && !job.cleanupPending);
    const looks = vi.spyOn(test.services.orm.em, "fork");
    await new Promise((resolve) => setTimeout(resolve, 1_000));
    expect(looks).not.toHaveBeenCalled();
    looks.mockRestore();
  });

  it("ends when the process is told to stop", async () => {
    const services = { ...test.services, stopping: new AbortController() };
    const stopping = createServer(createApp(services)).listen(0, "127.0.0.1");
    await once(stopping, "listening");
    const id = await count(60, 150);
    const stream = await follow(id, stopping);
    await expect.poll(() => jobsIn(stream.text()).at(-1)?.state, { timeout: 10_000 }).toBe("running");
    services.stopping.abort();
    await stream.ended;
    expect(jobsIn(stream.text()).at(-1)?.state).toBe("running");
    await new Promise((resolve) => stopping.close(resolve));
    await agent.post(`/api/jobs/${id}/cancel`).expect(200);
  });

  it("is refused while too many do, who then ask for the job itself", async () => {
    const watch = watchOf(test.services);
    const id = await count(1, 1);
    const ends = Array.from({ length: mostWatchers }, () => watch.watch(id, () => undefined));
    const response = await agent.get(`/api/jobs/${id}/events`);
    ends.forEach((end) => end());
    expectProblem(response, 503, "too-many-streams");
    expect(response.headers["retry-after"]).toBe("10");
    await waitForJob(test.services, id, hasEnded);
    await agent.get(`/api/jobs/${id}/events`).expect(200);
  });

  it("needs a sign-in and a job", async () => {
    expectProblem(await request(test.app).get(`/api/jobs/${unknown}/events`), 401, "not-signed-in");
    expectProblem(await agent.get(`/api/jobs/${unknown}/events`), 404, "not-found");
  });
});

const connectionsOf = (of: Server) =>
  new Promise<number>((resolve) => of.getConnections((_error, connections) => resolve(connections)));

describe("cancelling a job", () => {
  it("stops one that runs at its next step, and puts its subject right", async () => {
    const id = await count(201, 100);
    await waitForJob(test.services, id, (job) => job.done >= 1);
    const { body } = await agent.post(`/api/jobs/${id}/cancel`).expect(200);
    expect(body.state).toBe("running");
    const job = await waitForJob(test.services, id, (row) => hasEnded(row) && !row.cleanupPending);
    expect(job).toMatchObject({ state: "cancelled", attempt: 1, error: { code: "cancelled" } });
    expect(await marksOf(test.services, id)).not.toContain("end");
    expect(await givenUp(201)).toBe(1);
  });

  it("ends one that waits at once, and puts its subject right too", async () => {
    const running = await count(60, 100);
    await waitForJob(test.services, running, (job) => job.state === "running");
    const waiting = await count(202, 100);
    const { body } = await agent.post(`/api/jobs/${waiting}/cancel`).expect(200);
    expect(body).toMatchObject({ state: "cancelled", attempt: 0, error: { code: "cancelled" } });
    await agent.post(`/api/jobs/${running}/cancel`).expect(200);
    await waitForJob(test.services, waiting, (row) => !row.cleanupPending);
    expect(await marksOf(test.services, waiting)).toEqual([]);
    expect(await givenUp(202)).toBe(1);
  });

  it("is audited, changes nothing a second time, and is refused once the job has ended otherwise", async () => {
    const id = await count(203, 100);
    await waitForJob(test.services, id, (job) => job.state === "running");
    await agent.post(`/api/jobs/${id}/cancel`).expect(200);
    await waitForJob(test.services, id, hasEnded);
    const { body } = await agent.post(`/api/jobs/${id}/cancel`).expect(200);
    expect(body.state).toBe("cancelled");
    const entries = await test.services.orm.em.fork().find(AuditEntryEntity, { subjectKind: "job", subjectId: id });
    expect(entries).toMatchObject([
      { action: "job.cancelled", person: { id: personId }, detail: { kind: "trial.counting" } },
    ]);
    const done = await count(1, 1);
    await waitForJob(test.services, done, hasEnded);
    expectProblem(await agent.post(`/api/jobs/${done}/cancel`), 409, "job-ended");
  });

  it("is for the person who asked for the job, and administrators", async () => {
    const id = await count(60, 100);
    const other = await signedInAs(test.app, test.services, ["category-manager"]);
    expectProblem(await other.post(`/api/jobs/${id}/cancel`), 403, "not-your-job");
    expectProblem(await request(test.app).post(`/api/jobs/${id}/cancel`), 401, "not-signed-in");
    expectProblem(await agent.post(`/api/jobs/${unknown}/cancel`), 404, "not-found");
    const { body: token } = await agent
      .post("/api/tokens")
      .send({ name: "reads only", permissions: ["read"] })
      .expect(201);
    expectProblem(
      await request(test.app).post(`/api/jobs/${id}/cancel`).set("Authorization", `Bearer ${token.token}`),
      403,
      "not-your-job",
    );
    const administrator = await signedInAs(test.app, test.services, ["administrator"]);
    await administrator.post(`/api/jobs/${id}/cancel`).expect(200);
    await waitForJob(test.services, id, hasEnded);
  });

  it("of a job that the product made by itself is for administrators", async () => {
    const id = await count(60, 100, null);
    expectProblem(await agent.post(`/api/jobs/${id}/cancel`), 403, "not-your-job");
    const administrator = await signedInAs(test.app, test.services, ["administrator", "planner"]);
    await administrator.post(`/api/jobs/${id}/cancel`).expect(200);
    await waitForJob(test.services, id, hasEnded);
  });
});

async function givenUp(steps: number): Promise<number> {
  const { rows } = await test.services.pool.query("select 1 from trial_marks where mark = $1", [
    `given up ${steps} cancelled`,
  ]);
  return rows.length;
}
