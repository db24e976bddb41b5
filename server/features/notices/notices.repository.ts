import type { EntityManager } from "@mikro-orm/postgresql";
import type { Notice } from "@shared/contract/notices";
import type { Role } from "@shared/contract/permissions";
import { exists } from "../../database/exists";
import { PersonEntity, type Person } from "../accounts";

export function findReader(em: EntityManager, personId: string): Promise<Person | null> {
  return em.findOne(PersonEntity, { id: personId });
}

/** Who is to get a notice: everyone of these roles, and perhaps one person more; without those who do not want it or have left. */
export type Readers = { roles: readonly Role[]; personId?: string };

export async function findReaders(em: EntityManager, notice: Notice, { roles, personId }: Readers): Promise<Person[]> {
  const concerned = [{ roles: { $overlap: [...roles] } }, ...(personId === undefined ? [] : [{ id: personId }])];
  const people = await em.find(PersonEntity, { disabledAt: null, $or: concerned }, { orderBy: { email: "asc" } });
  return people.filter(({ unwantedNotices }) => !unwantedNotices.includes(notice));
}

/** Notes that a notice goes out for what it is about. False where it has gone out before. */
export async function noteSent(em: EntityManager, { notice, about, now }: { notice: Notice; about: string; now: Date }): Promise<boolean> {
  const rows = await em.execute<unknown[]>(
    "insert into sent_notices (notice, subject, sent_at) values (?, ?, ?) on conflict (notice, subject) do nothing returning notice",
    [notice, about, now],
  );
  return rows.length > 0;
}

export function wasSent(em: EntityManager, { notice, about }: { notice: Notice; about: string }): Promise<boolean> {
  return exists(em, "select from sent_notices where notice = ? and subject = ?", [notice, about]);
}
