import type { EntityManager } from "@mikro-orm/postgresql";
import { z } from "zod";
import type { HistoryKind } from "@shared/contract/catalogue-history";
import { readCursor, writeCursor } from "../../../http/page-cursor";
import { findChanges, type StoredChange } from "./history.repository";

const place = z.object({ id: z.number().int() });

type Wanted = { kind: HistoryKind; code?: string; cursor?: string; limit: number };

/** Who changed what, newest first. @throws ProblemError 422 for a cursor that is none. */
export async function listHistory(em: EntityManager, { kind, code, cursor, limit }: Wanted): Promise<{ items: StoredChange[]; nextCursor: string | null }> {
  const found = await findChanges(em, { kind, code, before: readCursor(place, cursor)?.id, limit });
  const items = found.slice(0, limit);
  const last = items.at(-1);
  return { items, nextCursor: found.length > limit && last !== undefined ? writeCursor({ id: last.id }) : null };
}
