import { createTransport } from "nodemailer";
import type { Environment } from "../environment";
import type { OutboxMessage } from "./outbox.entity";

const patienceMs = 20_000;

type MailEnvironment = Pick<Environment, "SMTP_URL" | "MAIL_FROM" | "PUBLIC_URL">;

/**
 * Hands a message to the mail server. Its Message-ID is made from its number, so that a second delivery of the same
 * message is recognised as one.
 *
 * @throws Error of nodemailer where the server cannot be reached or refuses.
 */
export async function sendMessage(
  message: OutboxMessage,
  { SMTP_URL, MAIL_FROM, PUBLIC_URL }: MailEnvironment,
): Promise<void> {
  const transport = createTransport({
    url: SMTP_URL,
    connectionTimeout: patienceMs,
    greetingTimeout: patienceMs,
    socketTimeout: patienceMs,
  });
  const host = PUBLIC_URL === undefined ? "shelftide" : new URL(PUBLIC_URL).hostname;
  try {
    await transport.sendMail({
      from: MAIL_FROM,
      to: { name: "", address: message.recipient },
      subject: message.subject,
      text: message.text,
      messageId: `<outbox-${message.id}-${message.createdAt.getTime()}@${host}>`,
      date: message.createdAt,
      headers: { "Auto-Submitted": "auto-generated" },
      disableFileAccess: true,
      disableUrlAccess: true,
    });
  } finally {
    transport.close();
  }
}
