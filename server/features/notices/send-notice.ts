import type { EntityManager } from "@mikro-orm/postgresql";
import type { Notice } from "@shared/contract/notices";
import type { Environment } from "../../environment";
import { writeMail } from "../../mail";
import type { Services } from "../../services";
import { findReaders, noteSent, type Readers } from "./notices.repository";

/** What a notice says; the greeting and how to be rid of such notices are added. */
export type Letter = { subject: string; paragraphs: readonly string[] };

export type NoticeOf = { notice: Notice; /** What it is about: it goes out once for that. */ about: string; to: Readers; letter: Letter };

/**
 * Writes a notice to everyone concerned who wants it, in the context's open transaction. For the same thing it does so once.
 *
 * @returns how many people it goes to.
 */
export async function sendNotice(em: EntityManager, services: Services, { notice, about, to, letter }: NoticeOf): Promise<number> {
  if (!(await noteSent(em, { notice, about, now: services.now() }))) return 0;
  const readers = await findReaders(em, notice, to);
  for (const { email, name } of readers) {
    const text = [`Hello ${name},`, ...letter.paragraphs, howToChoose(services.environment)].join("\n\n");
    await writeMail(em, services.queue, { to: email, subject: letter.subject, text: `${text}\n` });
  }
  return readers.length;
}

/** Where a page of the product is found; null where it does not know its own address. */
export function addressOf({ PUBLIC_URL }: Pick<Environment, "PUBLIC_URL">, path: string): string | null {
  return PUBLIC_URL === undefined ? null : new URL(path, PUBLIC_URL).href;
}

function howToChoose(environment: Environment): string {
  const address = addressOf(environment, "/notices");
  return `-- \nChoose which e-mails you get: ${address ?? "in Shelftide, under your name, Notices."}`;
}
