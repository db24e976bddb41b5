import type { EntityManager } from "@mikro-orm/postgresql";
import { noticeSchema, type NoticeChoices } from "@shared/contract/notices";
import { notFound } from "../../errors";
import type { Caller } from "../../http/route";
import { audit, type Person } from "../accounts";
import { findReader } from "./notices.repository";

/** The person whose choices are asked for. @throws ProblemError 404. */
export async function getReader(em: EntityManager, personId: string): Promise<Person> {
  const person = await findReader(em, personId);
  if (!person) throw notFound("person");
  return person;
}

type Change = { caller: Caller; requestId: string };

/** Keeps which notices a person wants. */
export async function chooseNotices(em: EntityManager, choices: NoticeChoices, { caller, requestId }: Change): Promise<Person> {
  const person = await getReader(em, caller.personId);
  const unwanted = noticeSchema.options.filter((notice) => !choices[notice]);
  if (unwanted.join() === person.unwantedNotices.join()) return person;
  const { personId, tokenId } = caller;
  audit(em, {
    personId, tokenId, requestId, action: "notices.chosen", subject: { kind: "person", id: personId },
    detail: { unwanted: { from: person.unwantedNotices, to: unwanted } },
  });
  person.unwantedNotices = unwanted;
  await em.flush();
  return person;
}
