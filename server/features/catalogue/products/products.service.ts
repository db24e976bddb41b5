import type { EntityManager } from "@mikro-orm/postgresql";
import type { changedProductSchema, newProductSchema } from "@shared/contract/catalogue-products";
import type { z } from "zod";
import { conflict, unusable } from "../../../errors";
import { CategoryEntity, ProductEntity, ProductTermsEntity, type Category, type Product } from "../catalogue.entities";
import { versionOfProduct } from "../catalogue.presenter";
import type { Author, Write } from "../changes/author";
import { changing } from "../changes/catalogue-lock.repository";
import { codeTaken } from "../changes/code-taken";
import { recordChange } from "../changes/record-change";
import { requireSeen } from "../changes/versions";
import { findProductAt, requireNamedProduct, requireProductAt } from "../codes-named.repository";
import { categoryValues, productValues, termsValues } from "../describe";
import { findLastChange } from "../history/history.repository";
import { referencesToProduct } from "../references.repository";
import { beginning, findCategory, replacesInTurn } from "./products.repository";

type Described = z.output<typeof changedProductSchema>;
type Code = { code: string; write: Write };

/** Enters a product, and its terms from the beginning. @throws ProblemError 409 where its code is taken, 422 that names a field. */
export function createProduct(em: EntityManager, { product, write }: { product: z.output<typeof newProductSchema>; write: Write }): Promise<void> {
  return changing(em, async (inner) => {
    const { code, terms, ...described } = product;
    if (await findProductAt(inner, code)) throw codeTaken("product", code);
    const row = inner.create(ProductEntity, { code, ...(await contentOf(inner, { described, by: write.by })) });
    const from = inner.create(ProductTermsEntity, { product: row, validFrom: beginning, unitCost: null, regularPrice: null, taxRate: 0, ...terms });
    inner.persist([row, from]);
    recordChange(inner, { by: write.by, what: "product", code, before: null, after: productValues(row) });
    recordChange(inner, { by: write.by, what: "terms", code, before: null, after: termsValues(from) });
  });
}

/** Changes what describes a product. @throws ProblemError 404, 412, or 422 that names a field. */
export function changeProduct(em: EntityManager, { code, product, write }: Code & { product: Described }): Promise<void> {
  return changing(em, async (inner) => {
    const row = await seenProduct(inner, { code, write });
    const before = productValues(row);
    inner.assign(row, await contentOf(inner, { described: product, by: write.by, row }));
    recordChange(inner, { by: write.by, what: "product", code, before, after: productValues(row) });
  });
}

/** Removes a product that nothing refers to, with its terms. @throws ProblemError 404, 412, or 409 that says what refers to it. */
export function removeProduct(em: EntityManager, { code, write }: Code): Promise<void> {
  return changing(em, async (inner) => {
    const row = await seenProduct(inner, { code, write });
    const references = await referencesToProduct(inner, row);
    if (references !== null) throw conflict("in-use", `${code} cannot be removed: ${references}.`);
    inner.remove(row);
    recordChange(inner, { by: write.by, what: "product", code, before: productValues(row), after: null });
  });
}

async function seenProduct(em: EntityManager, { code, write }: Code): Promise<Product> {
  const row = await requireProductAt(em, code);
  await requireSeen({
    seen: write.seen, version: versionOfProduct(row), what: `product ${code}`,
    lastChange: () => findLastChange(em, { kind: "product", what: "product", code }),
  });
  return row;
}

type Content = { described: Described; by: Author; row?: Product };

async function contentOf(em: EntityManager, { described, by, row }: Content) {
  const { category, replaces, ...rest } = described;
  return { ...rest, category: await enteredCategory(em, { code: category, by }), replaces: await replacedProduct(em, { replaces, row }) };
}

/** A category is entered with its first product; a better name can be given afterwards. */
async function enteredCategory(em: EntityManager, { code, by }: { code: string; by: Author }): Promise<Category> {
  const known = await findCategory(em, code);
  if (known) return known;
  const category = em.create(CategoryEntity, { code, name: code });
  em.persist(category);
  recordChange(em, { by, what: "category", code, before: null, after: categoryValues(category) });
  return category;
}

async function replacedProduct(em: EntityManager, { replaces, row }: { replaces: string | null; row?: Product }): Promise<Product | null> {
  if (replaces === null) return null;
  const replaced = await requireNamedProduct(em, { code: replaces, path: "replaces" });
  if (row === undefined || !(await replacesInTurn(em, { productId: row.id, earlierId: replaced.id }))) return replaced;
  const message = replaced.id === row.id ? "A product cannot replace itself." : `${replaces} replaces ${row.code} itself, directly or by others.`;
  throw unusable("replaces-in-turn", message, [{ path: "replaces", message }]);
}
