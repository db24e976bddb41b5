import { createHash, randomBytes } from "node:crypto";
import { once } from "node:events";
import { request as httpRequest } from "node:http";
import type { AddressInfo } from "node:net";
import { gzipSync } from "node:zlib";
import { Readable } from "node:stream";
import request from "supertest";
import { afterAll, afterEach, beforeAll, describe, expect, it, vi } from "vitest";
import { extractKindSchema } from "@shared/contract/extract-kinds";
import { extractSchema } from "@shared/contract/extracts";
import { ChainEntity } from "../../server/features/chain";
import { read, salesFile, startExtractsApp, upload, type ExtractsApp } from "../support/extracts";
import { bearerOf } from "../support/people";

let test: ExtractsApp;
const limitBytes = 20 * 1024 ** 2;

beforeAll(async () => {
  test = await startExtractsApp({ worker: false });
  await test.services.orm.em.fork().nativeUpdate(ChainEntity, {}, { uploadLimitBytes: limitBytes });
});
afterAll(() => test.stop());
afterEach(() => vi.restoreAllMocks());

const small = salesFile("2026-06-01,S1,P1,12,21.48,1.79,1.79,0,0,none");

/** A sales file of about so many bytes, whose lines do not repeat. */
function longFile(bytes: number): string {
  const width = 64;
  const unlike = randomBytes(Math.ceil((bytes * 3) / 4)).toString("base64url");
  const cells = Array.from({ length: Math.floor(bytes / (width + 44)) }, (_, at) => unlike.slice(at * width, (at + 1) * width));
  return [small.split("\n")[0], ...cells.map((cell) => `2026-06-01,S1,P1,12,21.48,1.79,1.79,0,0,${cell}`)].join("\n");
}

/** Runs an upload that must leave nothing, and sees that it has: no extract, no note, no file. */
async function leavesNothing<Answer>(run: () => Promise<Answer>): Promise<Answer> {
  const { services } = test;
  const put = vi.spyOn(services.files, "put");
  const count = async () => (await services.pool.query("select (select count(*) from extracts) + (select count(*) from incoming_files) as n")).rows[0].n;
  const before = await count();
  const answer = await run();
  await vi.waitFor(async () => expect(await count()).toBe(before), { timeout: 5_000 });
  for (const [{ key }] of put.mock.calls) await expect(services.files.get(key)).rejects.toThrow(/not exist/);
  return answer;
}

describe("uploading a file", () => {
  it("is answered 202 with the extract and where its check can be watched", async () => {
    const { body, headers } = await upload(test, { file: small, name: "week 23.csv" }).expect(202);
    expect(extractSchema.parse(body)).toMatchObject({
      kind: "sales", fileName: "week 23.csv", sizeBytes: small.length, state: "received", rows: null, failure: null,
      sha256: createHash("sha256").update(small).digest("hex"), may: { check: false, load: false, withdraw: false },
    });
    expect(headers.location).toBe(`/api/jobs/${body.jobId}`);
    await read(test, headers.location).expect(200).expect(({ body: job }) => expect(job).toMatchObject({ kind: "check-extract", state: "queued" }));
  });

  it("is written into the audit trail with who did it, by which token, and the file's hash", async () => {
    const { body } = await upload(test, { file: small }).expect(202);
    const { rows } = await test.services.pool.query("select * from audit_entries where subject_id = $1", [body.id]);
    expect(rows).toEqual([expect.objectContaining({
      action: "extract.uploaded", subject_kind: "extract", person_id: body.uploadedBy.id, token_id: expect.any(String),
      detail: expect.objectContaining({ sha256: body.sha256, sizeBytes: small.length }),
    })]);
  });

  it.each([
    ["a CSV file of 11 MB", () => Buffer.from(longFile(11 * 1024 ** 2))],
    ["a compressed file of more than 5 MB", () => gzipSync(longFile(13 * 1024 ** 2), { level: 1 })],
    ["a file with a byte order mark and Windows line ends", () => Buffer.from(`\ufeff${small.replaceAll("\n", "\r\n")}`)],
  ])("gives %s back byte for byte", async (_, make) => {
    const file = make();
    const { body } = await upload(test, { file, name: "größe 24.csv" }).expect(202);
    const answer = await read(test, `/api/extracts/${body.id}/original`).buffer(true).parse((response, done) => {
      const chunks: Buffer[] = [];
      response.on("data", (chunk: Buffer) => chunks.push(chunk)).on("end", () => done(null, Buffer.concat(chunks)));
    }).expect(200);
    expect(Buffer.compare(answer.body, file)).toBe(0);
    expect(answer.headers).toMatchObject({
      "content-type": "application/octet-stream", "content-length": String(file.length), "x-content-type-options": "nosniff",
      "content-disposition": "attachment; filename=\"gr??e 24.csv\"; filename*=UTF-8''gr%C3%B6%C3%9Fe%2024.csv",
    });
    expect(createHash("sha256").update(answer.body).digest("hex")).toBe(body.sha256);
  });

  it.each([
    ["../../etc/passwd.csv", "passwd.csv"],
    ["C:\\exports\\week 24.csv", "week 24.csv"],
    ["..", "unnamed.csv"],
    ["مبيعات الأسبوع 🍎.csv", "مبيعات الأسبوع 🍎.csv"],
    ["sales\u202evsc.exe.csv", "salesvsc.exe.csv"],
    [`${"w".repeat(300)}.csv.gz`, `${"w".repeat(193)}.csv.gz`],
  ])("keeps the name %j as %j", async (name, kept) => {
    const { body } = await upload(test, { file: small, name }).expect(202);
    expect(body.fileName).toBe(kept);
  });
});

describe("an upload is refused, and leaves nothing,", () => {
  it("without a session or token", async () => {
    await leavesNothing(() => request(test.app).post("/api/extracts").field("kind", "sales").attach("file", Buffer.from(small), "a.csv").expect(401));
  });

  it("from someone who is no data admin", async () => {
    const planner = await bearerOf(test.app, test.services, ["planner"]);
    const { body } = await leavesNothing(() => upload({ app: test.app, dataAdmin: planner }, { file: small }).expect(403));
    expect(body.code).toBe("not-allowed");
  });

  it.each([
    ["an unknown kind", () => upload(test, { file: small, kind: "weather" }), 422, "invalid-request"],
    ["no kind", () => request(test.app).post("/api/extracts").set("Authorization", test.dataAdmin).attach("file", Buffer.from(small), "a.csv"), 422, "invalid-request"],
    ["a layout that nobody saved", () => upload(test, { file: small }).field("layout", "till export"), 422, "unknown-layout"],
    ["no file", () => request(test.app).post("/api/extracts").set("Authorization", test.dataAdmin).field("kind", "sales"), 422, "missing-file"],
    ["the file in another field", () => request(test.app).post("/api/extracts").set("Authorization", test.dataAdmin).field("kind", "sales").attach("data", Buffer.from(small), "a.csv"), 422, "missing-file"],
    ["two files", () => upload(test, { file: small }).attach("file", Buffer.from(small), "second.csv"), 422, "one-file-only"],
    ["too many fields", () => Array.from({ length: 20 }).reduce<request.Test>((test_, _, at) => test_.field(`extra${at}`, "x"), upload(test, { file: small })), 422, "invalid-request"],
    ["an empty file", () => upload(test, { file: "" }), 422, "empty-file"],
    ["a workbook", () => upload(test, { file: Buffer.concat([Buffer.from("PK\x03\x04"), randomBytes(3000)]), name: "sales.csv" }), 422, "not-a-csv-file"],
    ["a picture", () => upload(test, { file: Buffer.concat([Buffer.from([0x89]), Buffer.from("PNG\r\n\x1a\n"), randomBytes(9_000)]) }), 422, "not-a-csv-file"],
    ["a PDF", () => upload(test, { file: "%PDF-1.7\nnot sales" }), 422, "not-a-csv-file"],
    ["NUL bytes", () => upload(test, { file: `week,store\0,product\n${"x".repeat(10_000)}` }), 422, "not-a-csv-file"],
    ["JSON", () => request(test.app).post("/api/extracts").set("Authorization", test.dataAdmin).send({ kind: "sales" }), 415, "unsupported-content-type"],
    ["no body", () => request(test.app).post("/api/extracts").set("Authorization", test.dataAdmin), 415, "unsupported-content-type"],
    ["multipart without a boundary", () => request(test.app).post("/api/extracts").set("Authorization", test.dataAdmin).set("Content-Type", "multipart/form-data").send("x"), 400, "malformed-upload"],
    ["multipart that ends early", () => request(test.app).post("/api/extracts").set("Authorization", test.dataAdmin).set("Content-Type", "multipart/form-data; boundary=cut")
      .send("--cut\r\nContent-Disposition: form-data; name=\"file\"; filename=\"a.csv\"\r\n\r\nweek,store"), 400, "malformed-upload"],
  ])("with %s", async (_, send, status, code) => {
    const { body } = await leavesNothing(() => Promise.resolve(send().expect(status)));
    expect(body).toMatchObject({ code, status, title: expect.any(String), requestId: expect.any(String) });
    expect(body.detail).toMatch(/^[A-Z].*\.$/);
  });

  it("names the kinds where the kind is unknown", async () => {
    const { body } = await upload(test, { file: small, kind: "weather" });
    expect(body.detail).toContain(extractKindSchema.options.join(", "));
  });

  it("where the file store does not take the file", async () => {
    vi.spyOn(test.services.files, "put").mockImplementation(async ({ body }) => {
      await once(body, "readable");
      throw new Error("connect ECONNREFUSED");
    });
    const { body } = await upload(test, { file: longFile(1024 ** 2) }).expect(503);
    expect(body.code).toBe("file-store-unavailable");
    expect((await test.services.pool.query("select 1 from incoming_files")).rows).toEqual([]);
  });

  it("where the extract cannot be entered", async () => {
    vi.spyOn(test.services.queue, "enqueue").mockRejectedValue(new Error("no queue"));
    await leavesNothing(() => Promise.resolve(upload(test, { file: small }).expect(500)));
  });
});

describe("a file over the chain's limit", () => {
  it("is refused by its announced length, before it is read", async () => {
    const { body } = await leavesNothing(() => Promise.resolve(upload(test, { file: Buffer.alloc(limitBytes + 1024 ** 2, "x") }).expect(413)));
    expect(body).toMatchObject({ code: "file-too-large", detail: expect.stringContaining("20 MB") });
  });

  it("is refused while it streams in, without waiting for its end", async () => {
    const server = test.app.listen(0, "127.0.0.1");
    await once(server, "listening");
    let sentBytes = 0;
    try {
      const answer = await leavesNothing(() => sendForever(server.address() as AddressInfo, (bytes) => { sentBytes += bytes; }));
      expect(answer).toMatchObject({ status: 413, code: "file-too-large" });
      expect(sentBytes).toBeGreaterThan(limitBytes);
      expect(sentBytes).toBeLessThan(4 * limitBytes);
    } finally {
      server.closeAllConnections();
      server.close();
    }
  });
});

/** Sends a file of unknown, endless length until an answer comes. */
async function sendForever({ port }: AddressInfo, onSent: (bytes: number) => void): Promise<{ status: number; code: string }> {
  const chunk = Buffer.from(`${"2026-06-01,S1,P1,12,21.48,1.79,1.79,0,0,none\n".repeat(1000)}`);
  const sending = httpRequest({
    port, host: "127.0.0.1", method: "POST", path: "/api/extracts",
    headers: { Authorization: test.dataAdmin, "Content-Type": "multipart/form-data; boundary=endless" },
  });
  sending.write("--endless\r\nContent-Disposition: form-data; name=\"kind\"\r\n\r\nsales\r\n");
  sending.write("--endless\r\nContent-Disposition: form-data; name=\"file\"; filename=\"a.csv\"\r\n\r\n");
  let isAnswered = false;
  const answered = once(sending, "response").then(([response]) => {
    isAnswered = true;
    return response;
  });
  sending.on("error", () => undefined);
  while (!isAnswered) {
    const isReady = sending.write(chunk);
    onSent(chunk.length);
    await (isReady ? new Promise(setImmediate) : Promise.race([once(sending, "drain"), answered]));
  }
  const response = await answered;
  let text = "";
  for await (const part of response) text += part;
  sending.destroy();
  return JSON.parse(text);
}

describe("an upload whose sender goes away", () => {
  it.each([["in its first megabyte", 512 * 1024], ["after several parts went to the store", 16 * 1024 ** 2]])("%s leaves nothing", async (_, bytes) => {
    const server = test.app.listen(0, "127.0.0.1");
    await once(server, "listening");
    try {
      await leavesNothing(async () => {
        const { port } = server.address() as AddressInfo;
        const sending = httpRequest({
          port, host: "127.0.0.1", method: "POST", path: "/api/extracts",
          headers: { Authorization: test.dataAdmin, "Content-Type": "multipart/form-data; boundary=gone", "Content-Length": String(bytes + 1024 ** 2) },
        });
        sending.on("error", () => undefined);
        sending.write("--gone\r\nContent-Disposition: form-data; name=\"file\"; filename=\"a.csv\"\r\n\r\n");
        await new Promise((resolve) => sending.write(longFile(bytes), resolve));
        await vi.waitFor(async () => expect((await test.services.pool.query("select 1 from incoming_files")).rows).toHaveLength(1));
        sending.destroy();
      });
    } finally {
      server.closeAllConnections();
      server.close();
    }
  });
});

describe("what a killed process left of an upload", () => {
  it("is removed from the store two days later", async () => {
    const { services } = test;
    const key = "extracts/left-behind/original";
    await services.files.put({ key, body: Readable.from([Buffer.from(small)]), contentType: "text/csv" });
    await services.pool.query("insert into incoming_files values ($1, $2)", [key, new Date(services.now().getTime() - 49 * 3_600_000)]);
    await upload(test, { file: small }).expect(202);
    await vi.waitFor(async () => expect((await services.pool.query("select 1 from incoming_files")).rows).toEqual([]));
    await expect(services.files.get(key)).rejects.toThrow(/not exist/);
  });
});
