import { once } from "node:events";
import type { AddressInfo } from "node:net";
import { simpleParser, type ParsedMail } from "mailparser";
import { SMTPServer } from "smtp-server";
import { afterAll, beforeAll, describe, expect, it, vi } from "vitest";
import { JobEntity } from "../../server/features/jobs";
import { OutboxMessageEntity, mailJobs, writeMail } from "../../server/mail";
import { hasEnded, waitForJob } from "../support/jobs";
import { startTestApp, type TestApp } from "../support/test-app";

let test: TestApp;
let server: SMTPServer;
const received: ParsedMail[] = [];
/** What the server answers instead of taking a message, each once. */
const refusals: Error[] = [];

class Refusal extends Error {
  constructor(
    readonly responseCode: number,
    message: string,
  ) {
    super(message);
  }
}

beforeAll(async () => {
  server = new SMTPServer({
    authOptional: true,
    disabledCommands: ["STARTTLS"],
    onData(stream, _session, callback) {
      void simpleParser(stream).then((mail) => {
        received.push(mail);
        callback(refusals.shift());
      });
    },
  });
  const listening = server.listen(0, "127.0.0.1");
  await once(listening, "listening");
  vi.stubEnv("TEST_SMTP_URL", `smtp://127.0.0.1:${(listening.address() as AddressInfo).port}`);
  test = await startTestApp();
  // The delays of the real kind last up to hours.
  const quick = mailJobs.map((definition) => ({ ...definition, retryDelaysSeconds: [0] }));
  await test.services.queue.work(quick, test.services);
});
afterAll(async () => {
  await test.stop();
  await new Promise<void>((resolve) => server.close(resolve));
});

async function write(subject: string, to = "ada@larkmoor.example") {
  await test.services.orm.em
    .fork()
    .transactional((em) => writeMail(em, test.services.queue, { to, subject, text: "Week 24 is loaded." }));
  const message = await test.services.orm.em
    .fork()
    .findOneOrFail(OutboxMessageEntity, { subject: subject.replace(/\s+/g, " ") });
  const job = await test.services.orm.em
    .fork()
    .findOneOrFail(JobEntity, { kind: "send-mail", payload: { messageId: message.id } });
  return { messageId: message.id, jobId: job.id };
}

const receivedWith = (subject: string) => received.filter((mail) => mail.subject === subject);
const messageOf = (id: number) => test.services.orm.em.fork().findOneOrFail(OutboxMessageEntity, { id });

describe("an e-mail of the outbox", () => {
  it("is sent once, and marked as sent", async () => {
    const { messageId, jobId } = await write("Extract loaded");
    expect(await waitForJob(test.services, jobId, hasEnded)).toMatchObject({ state: "succeeded" });
    const [mail, ...more] = receivedWith("Extract loaded");
    expect(more).toEqual([]);
    expect(mail?.text).toContain("Week 24 is loaded.");
    expect(mail?.from?.text).toContain("no-reply@shelftide.example");
    expect(await messageOf(messageId)).toMatchObject({ attempts: 1, lastError: null, sentAt: expect.any(Date) });
  });

  it("is not there where the transaction it was written in is rolled back", async () => {
    const em = test.services.orm.em.fork();
    await expect(
      em.transactional(async (inner) => {
        await writeMail(inner, test.services.queue, { to: "ada@larkmoor.example", subject: "Never", text: "Never." });
        throw new Error("on second thoughts");
      }),
    ).rejects.toThrow("on second thoughts");
    expect(await em.fork().count(OutboxMessageEntity, { subject: "Never" })).toBe(0);
  });

  it("is tried again where the server cannot take it now, under the same Message-ID", async () => {
    refusals.push(new Refusal(451, "try later"));
    const { messageId, jobId } = await write("Try again");
    expect(await waitForJob(test.services, jobId, hasEnded)).toMatchObject({ state: "succeeded", failures: 1 });
    expect(await messageOf(messageId)).toMatchObject({ attempts: 2, lastError: null });
    const ids = receivedWith("Try again").map((mail) => mail.messageId);
    expect(ids).toHaveLength(2);
    expect(ids[0]).toMatch(/^<outbox-\d+-\d+@127\.0\.0\.1>$/);
    expect(ids[1]).toBe(ids[0]);
  });

  it("is not tried again where the server refuses it for good, and keeps the reason", async () => {
    refusals.push(new Refusal(554, "we take nothing of this kind"));
    const { messageId, jobId } = await write("Refused");
    expect(await waitForJob(test.services, jobId, hasEnded)).toMatchObject({
      state: "failed",
      error: { code: "mail-refused" },
    });
    const message = await messageOf(messageId);
    expect(message).toMatchObject({ attempts: 1, sentAt: null });
    expect(message.lastError).toContain("we take nothing of this kind");
  });

  it("is not sent a second time where its job runs again", async () => {
    const { messageId, jobId } = await write("Only once");
    await waitForJob(test.services, jobId, hasEnded);
    const [sendMail] = mailJobs;
    if (!sendMail) throw new Error("There is no job that sends mail.");
    const again = await test.services.orm.em
      .fork()
      .transactional((em) => test.services.queue.enqueue(em, sendMail, { messageId }));
    expect(await waitForJob(test.services, again, hasEnded)).toMatchObject({ state: "succeeded" });
    expect(receivedWith("Only once")).toHaveLength(1);
  });

  it("cannot be given further headers by a line break in its subject", async () => {
    const { jobId } = await write("Hello\r\nBcc: everyone@larkmoor.example");
    await waitForJob(test.services, jobId, hasEnded);
    const [mail] = receivedWith("Hello Bcc: everyone@larkmoor.example");
    expect(mail?.bcc).toBeUndefined();
  });
});
