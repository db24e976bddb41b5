import { createTransport } from "nodemailer";
import { mkdtempSync, rmSync } from "node:fs";
import { once } from "node:events";
import { connect } from "node:net";
import { tmpdir } from "node:os";
import { join, resolve } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { startPart, type RunningPart } from "../../infra/lib/part.mjs";
import { pickPort } from "../../infra/lib/ports.mjs";

const folder = mkdtempSync(join(tmpdir(), "shelftide-mail-"));
let part: RunningPart;
let page: string;
let smtpPort: number;

beforeAll(async () => {
  smtpPort = await pickPort();
  const pagePort = await pickPort({ taken: [smtpPort] });
  page = `http://127.0.0.1:${pagePort}`;
  const args = [resolve("infra/fakes/mail.mjs"), String(smtpPort), String(pagePort), folder];
  part = startPart({ name: "mail catcher", args, env: process.env, announces: true });
  await part.ready;
});

afterAll(async () => {
  await part.stop();
  rmSync(folder, { recursive: true, force: true });
});

async function send(mail: { to: string; subject: string; text: string }) {
  const transport = createTransport(`smtp://127.0.0.1:${smtpPort}`);
  await transport.sendMail({ from: "Shelftide <shelftide@larkmoor.example>", ...mail });
  transport.close();
}

async function messagesTo(address: string) {
  const response = await fetch(`${page}/messages.json?to=${encodeURIComponent(address)}`);
  const { messages } = (await response.json()) as { messages: { id: string; subject: string; text: string }[] };
  return messages;
}

describe("the mail catcher", () => {
  it("keeps what is sent, newest first, for each recipient apart", async () => {
    await send({ to: "ada@larkmoor.example", subject: "First", text: "Zürich – 1" });
    await send({ to: "ada@larkmoor.example", subject: "Second", text: "2" });
    await send({ to: "ben@larkmoor.example", subject: "Third", text: "3" });
    const messages = await messagesTo("ada@larkmoor.example");
    expect(messages.map((message) => message.subject)).toEqual(["Second", "First"]);
    expect(messages[1].text.trim()).toBe("Zürich – 1");
  });

  it("shows a mail as text, with links that can be followed and nothing that runs", async () => {
    await send({
      to: "cleo@larkmoor.example", subject: "<script>alert(1)</script>",
      text: "Open http://127.0.0.1:4310/sign-in?a=1&b=2.\n<img src=x onerror=alert(1)>",
    });
    const [message] = await messagesTo("cleo@larkmoor.example");
    const response = await fetch(`${page}/messages/${message.id}`);
    const html = await response.text();
    expect(html).not.toMatch(/<script|<img/);
    expect(html).toContain('<a href="http://127.0.0.1:4310/sign-in?a=1&amp;b=2">');
    expect(response.headers.get("content-security-policy")).toContain("default-src 'none'");
    expect(await (await fetch(page)).text()).toContain("&lt;script&gt;alert(1)&lt;/script&gt;");
  });

  it("goes on where a sender is cut off in the middle of a mail", async () => {
    const sender = connect(smtpPort, "127.0.0.1");
    await once(sender, "data");
    sender.write("EHLO x\r\nMAIL FROM:<a@larkmoor.example>\r\nRCPT TO:<dora@larkmoor.example>\r\nDATA\r\n");
    await once(sender, "data");
    sender.resetAndDestroy();
    await send({ to: "dora@larkmoor.example", subject: "Whole", text: "1" });
    expect((await messagesTo("dora@larkmoor.example")).map(({ subject }) => subject)).toEqual(["Whole"]);
  });

  it("answers 404 for a mail that it does not have, and for paths out of its folder", async () => {
    expect((await fetch(`${page}/messages/20260101-abc`)).status).toBe(404);
    expect((await fetch(`${page}/messages/..%2F..%2Fstate`)).status).toBe(404);
  });
});
