import type { EntityManager } from "@mikro-orm/postgresql";
import { exists } from "../../../database/exists";
import { EventEntity, type Event } from "../catalogue.entities";

export const findEvent = (em: EntityManager, id: number): Promise<Event | null> => em.findOne(EventEntity, { id });

type Wanted = { code?: string; from?: string; to?: string };

/** Occurrences by first day, of a code and that touch some days where asked for. */
export function findEventsBetween(em: EntityManager, { code, from, to }: Wanted): Promise<Event[]> {
  return em.find(
    EventEntity,
    { ...(code !== undefined && { code }), ...(from !== undefined && { lastDay: { $gte: from } }), ...(to !== undefined && { firstDay: { $lte: to } }) },
    { orderBy: { firstDay: "asc", code: "asc", region: "asc" } },
  );
}

/** The occurrence of a code that begins on a day in a region. */
export function findOccurrence(em: EntityManager, { code, firstDay, region }: Pick<Event, "code" | "firstDay" | "region">): Promise<Event | null> {
  return em.findOne(EventEntity, { code, firstDay, region });
}

/** Whether a store is in a region. */
export const isRegion = (em: EntityManager, region: string): Promise<boolean> => exists(em, "select from stores where region = ?", [region]);
