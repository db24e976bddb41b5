import type { EntityManager } from "@mikro-orm/postgresql";
import { CategoryEntity } from "../catalogue.entities";
import type { Write } from "../changes/author";
import { changing } from "../changes/catalogue-lock.repository";
import { recordChange } from "../changes/record-change";
import { requireSeen, versionOf } from "../changes/versions";
import { categoryValues } from "../describe";
import { findLastChange } from "../history/history.repository";
import { findCategories, findCategory } from "./products.repository";

/** All categories, by code. */
export const listCategories = (em: EntityManager) => findCategories(em);

/** Names a category, and enters it where it is new. @throws ProblemError 412 where someone named it after the caller had read it. */
export function nameCategory(em: EntityManager, { code, name, write }: { code: string; name: string; write: Write }): Promise<void> {
  return changing(em, async (inner) => {
    const row = await findCategory(inner, code);
    const before = row ? categoryValues(row) : null;
    await requireSeen({
      seen: write.seen, version: before && versionOf(before), what: `category ${code}`,
      lastChange: () => findLastChange(inner, { kind: "category", what: "category", code }),
    });
    const written = row ? inner.assign(row, { name }) : inner.create(CategoryEntity, { code, name });
    inner.persist(written);
    recordChange(inner, { by: write.by, what: "category", code, before, after: categoryValues(written) });
  });
}
