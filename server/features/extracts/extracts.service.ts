import type { EntityManager } from "@mikro-orm/postgresql";
import type { Readable } from "node:stream";
import { z } from "zod";
import type { ExtractChanges, LoadedWeeks } from "@shared/contract/extracts";
import { conflict, notFound, ProblemError } from "../../errors";
import type { Services } from "../../services";
import { calendarOf, dayIn, getChain } from "../chain";
import type { Extract } from "./extracts.entities";
import { changesOf, findExtract, findExtracts, findLoadedWeeks } from "./extracts.repository";
import { standingOf } from "./loaded-weeks";
import { readCursor, writeCursor } from "../../http/page-cursor";

export type Page<Item> = { items: Item[]; nextCursor: string | null };
export type PageQuery = { cursor?: string; limit: number };

/** The extract with this id. @throws ProblemError 404. */
export async function getExtract(em: EntityManager, id: string): Promise<Extract> {
  const extract = await findExtract(em, id);
  if (!extract) throw notFound("extract");
  return extract;
}

const extractCursor = z.object({ uploadedAt: z.iso.datetime(), id: z.uuid() });

/** Extracts, newest first. @throws ProblemError 422 for a cursor that is none. */
export async function listExtracts(em: EntityManager, { cursor, limit }: PageQuery): Promise<Page<Extract>> {
  const found = await findExtracts(em, { after: readCursor(extractCursor, cursor), limit });
  return pageOf(found, limit, ({ uploadedAt, id }) => ({ uploadedAt: uploadedAt.toISOString(), id }));
}

export function pageOf<Item>(found: Item[], limit: number, position: (item: Item) => Record<string, string | number>): Page<Item> {
  const items = found.slice(0, limit);
  const last = items.at(-1);
  return { items, nextCursor: found.length > limit && last !== undefined ? writeCursor(position(last)) : null };
}

/** What loading would change, or changed. @throws ProblemError 404, or 409 before the file was checked. */
export async function getChanges(em: EntityManager, extractId: string): Promise<ExtractChanges> {
  const extract = await getExtract(em, extractId);
  const changes = await changesOf(em, extract);
  if (changes) return changes;
  throw conflict("not-checked", "What loading would change is known once the file is checked and has rows that can be used.");
}

/** Which weeks of sales are loaded, missing and expected next, at a moment. */
export async function readLoadedWeeks(em: EntityManager, now: Date): Promise<LoadedWeeks> {
  const chain = await getChain(em);
  return standingOf(await findLoadedWeeks(em), { today: dayIn(chain.timeZone, now), weekStart: calendarOf(chain).weekStart });
}

/** The file as it arrived. @throws ProblemError 404, or 503 where the file store does not give it out. */
export async function openOriginal(em: EntityManager, services: Services, extractId: string): Promise<{ extract: Extract; body: Readable }> {
  const extract = await getExtract(em, extractId);
  try {
    return { extract, body: await services.files.get(extract.storageKey) };
  } catch (error) {
    services.logger.error({ err: error, extract: extractId }, "an original could not be read");
    throw new ProblemError({ status: 503, code: "file-store-unavailable", detail: "The file cannot be read just now. Try again in a minute." });
  }
}
