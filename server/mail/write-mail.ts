import type { EntityManager } from "@mikro-orm/postgresql";
import type { JobQueue } from "../jobs/job-queue";
import { sendMailJob } from "./mail.jobs";
import { OutboxMessageEntity } from "./outbox.entity";

export type Mail = {
  /** E-mail address. */
  to: string;
  subject: string;
  /** Plain text. */
  text: string;
};

/**
 * Writes an e-mail inside the context's open transaction, and the job that sends it: both are there if the transaction
 * is, and neither if not.
 *
 * @example await em.transactional((inner) => writeMail(inner, services.queue, { to, subject, text }));
 */
export async function writeMail(em: EntityManager, queue: JobQueue, { to, subject, text }: Mail): Promise<void> {
  const message = em.create(OutboxMessageEntity, { recipient: to, subject: oneLine(subject).slice(0, 200), text });
  await em.persist(message).flush();
  await queue.enqueue(em, sendMailJob, { messageId: message.id });
}

/** A line break in a subject would begin another header. */
const oneLine = (text: string) => text.replace(/\s+/g, " ").trim();
