import type { EntityManager } from "@mikro-orm/postgresql";
import type { changedEventSchema } from "@shared/contract/catalogue-events";
import type { z } from "zod";
import { notFound, unusable } from "../../../errors";
import { EventEntity, type Event } from "../catalogue.entities";
import type { Author, Write } from "../changes/author";
import { changing } from "../changes/catalogue-lock.repository";
import { recordChange } from "../changes/record-change";
import { requireSeen } from "../changes/versions";
import { eventValues } from "../describe";
import { findLastChange } from "../history/history.repository";
import { versionOfEvent } from "./events.presenter";
import { findEvent, findEventsBetween, findOccurrence, isRegion } from "./events.repository";

type Given = z.output<typeof changedEventSchema>;
type Place = { id: number; write: Write };

/** Occurrences by first day; those of a code, and those that touch some days. */
export const listEvents = findEventsBetween;

/** Enters an occurrence. @throws ProblemError 422 that names a field. */
export function createEvent(em: EntityManager, { event, write }: { event: Given; write: Write }): Promise<Event> {
  return changing(em, async (inner) => {
    const content = await contentOf(inner, { event });
    const row = inner.create(EventEntity, content);
    inner.persist(row);
    recordChange(inner, { by: write.by, what: "event", code: row.code, before: null, after: eventValues(row) });
    return row;
  });
}

/** Changes an occurrence. @throws ProblemError 404, 412, or 422 that names a field. */
export function changeEvent(em: EntityManager, { id, event, write }: Place & { event: Given }): Promise<Event> {
  return changing(em, async (inner) => {
    const row = await seenEvent(inner, { id, write });
    const before = { code: row.code, values: eventValues(row) };
    inner.assign(row, await contentOf(inner, { event, row }));
    recordEdit(inner, { by: write.by, before, row });
    return row;
  });
}

/** One that goes on under another code leaves the history of the first and enters the other's. */
function recordEdit(em: EntityManager, { by, before, row }: { by: Author; before: { code: string; values: ReturnType<typeof eventValues> }; row: Event }): void {
  const after = eventValues(row);
  if (before.code === row.code) {
    recordChange(em, { by, what: "event", code: row.code, before: before.values, after });
    return;
  }
  recordChange(em, { by, what: "event", code: before.code, before: before.values, after: null });
  recordChange(em, { by, what: "event", code: row.code, before: null, after });
}

/** Removes an occurrence; sales that name it keep its code. @throws ProblemError 404 or 412. */
export function removeEvent(em: EntityManager, place: Place): Promise<void> {
  return changing(em, async (inner) => {
    const row = await seenEvent(inner, place);
    inner.remove(row);
    recordChange(inner, { by: place.write.by, what: "event", code: row.code, before: eventValues(row), after: null });
  });
}

async function seenEvent(em: EntityManager, { id, write }: Place): Promise<Event> {
  const row = await findEvent(em, id);
  if (!row) throw notFound("event");
  await requireSeen({
    seen: write.seen, version: versionOfEvent(row), what: `${row.name} from ${row.firstDay}`,
    lastChange: () => findLastChange(em, { kind: "event", what: "event", code: row.code }),
  });
  return row;
}

async function contentOf(em: EntityManager, { event, row }: { event: Given; row?: Event }) {
  const content = { ...event, region: event.region ?? "" };
  if (event.region !== null && !(await isRegion(em, event.region))) {
    throw field("unknown-region", "region", `No store is in the region ${event.region}.`);
  }
  const other = await findOccurrence(em, content);
  if (other && other !== row) throw field("already-there", "firstDay", `${event.code} has an occurrence from ${event.firstDay} already. Change that one.`);
  return content;
}

const field = (code: string, path: string, message: string) => unusable(code, message, [{ path, message }]);
