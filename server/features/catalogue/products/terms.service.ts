import type { EntityManager } from "@mikro-orm/postgresql";
import type { changedTermsSchema } from "@shared/contract/catalogue-products";
import type { z } from "zod";
import { conflict, notFound } from "../../../errors";
import { ProductTermsEntity, type ProductTerms } from "../catalogue.entities";
import type { Write } from "../changes/author";
import { changing } from "../changes/catalogue-lock.repository";
import { recordChange } from "../changes/record-change";
import { requireSeen } from "../changes/versions";
import { requireProductAt } from "../codes-named.repository";
import { termsValues } from "../describe";
import { findLastChange } from "../history/history.repository";
import { findTerms } from "./products.repository";
import { versionOfTerms } from "./products.presenter";

/** A product's terms, oldest first. @throws ProblemError 404. */
export async function listTerms(em: EntityManager, code: string): Promise<ProductTerms[]> {
  return findTerms(em, (await requireProductAt(em, code)).id);
}

type Place = { code: string; validFrom: string; write: Write };

/** Says what holds for a product from a day on. @throws ProblemError 404 where there is no such product, or 412. */
export function putTerms(em: EntityManager, { terms, ...place }: Place & { terms: z.output<typeof changedTermsSchema> }): Promise<ProductTerms> {
  return changing(em, async (inner) => {
    const { code, validFrom, write } = place;
    const product = await requireProductAt(inner, code);
    const row = (await findTerms(inner, product.id)).find((each) => each.validFrom === validFrom);
    await requireTermsSeen(inner, { ...place, row });
    const before = row ? termsValues(row) : null;
    const written = row ? inner.assign(row, terms) : inner.create(ProductTermsEntity, { product, validFrom, ...terms });
    inner.persist(written);
    recordChange(inner, { by: write.by, what: "terms", code, before, after: termsValues(written) });
    return written;
  });
}

/** Removes terms; those before them go on. @throws ProblemError 404, 412, or 409 for a product's only ones. */
export function removeTerms(em: EntityManager, place: Place): Promise<void> {
  return changing(em, async (inner) => {
    const { code, validFrom, write } = place;
    const all = await findTerms(inner, (await requireProductAt(inner, code)).id);
    const row = all.find((each) => each.validFrom === validFrom);
    await requireTermsSeen(inner, { ...place, row });
    if (!row) throw notFound("day from which terms hold");
    if (all.length === 1) throw conflict("only-terms", `These are the only terms of ${code}. Change them, or enter others first.`);
    inner.remove(row);
    recordChange(inner, { by: write.by, what: "terms", code, before: termsValues(row), after: null });
  });
}

function requireTermsSeen(em: EntityManager, { code, validFrom, write, row }: Place & { row?: ProductTerms }): Promise<void> {
  return requireSeen({
    seen: write.seen, version: row ? versionOfTerms(row) : null, what: `the terms of ${code} from ${validFrom}`,
    lastChange: () => findLastChange(em, { kind: "product", what: "terms", code }),
  });
}
