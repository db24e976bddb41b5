import type { EntityManager } from "@mikro-orm/postgresql";
import { unusable } from "../../errors";
import { findProduct, findStores, type ProductReference, type StoreReference } from "./catalogue-lookup.repository";

/** Naming every unknown store of a long list would help nobody. */
const mostNamed = 50;

/**
 * The product of a code.
 *
 * @throws ProblemError 422 "unknown-product" that names it.
 */
export async function requireProduct(em: EntityManager, code: string): Promise<ProductReference> {
  const product = await findProduct(em, code);
  if (product) return product;
  const detail = `There is no product "${code}". Check the code, or load it with a products extract.`;
  throw unusable("unknown-product", detail, [{ path: "product", message: detail }]);
}

/**
 * The stores of codes, in the order given, each once.
 *
 * @throws ProblemError 422 "unknown-store" that names those which do not exist.
 */
export async function requireStores(em: EntityManager, codes: readonly string[]): Promise<StoreReference[]> {
  const unique = [...new Set(codes)];
  const found = new Map((await findStores(em, unique)).map((store) => [store.code, store]));
  const unknown = unique.filter((code) => !found.has(code));
  if (unknown.length > 0) {
    const named = unknown.slice(0, mostNamed);
    const errors = named.map((code) => ({
      path: `stores.${codes.indexOf(code)}`,
      message: `There is no store "${code}".`,
    }));
    const others = unknown.length > 1 ? ` and ${unknown.length - 1} more` : "";
    throw unusable(
      "unknown-store",
      `There is no store "${unknown[0]}"${others}. Check the codes, or load them with a stores extract.`,
      errors,
    );
  }
  return unique.map((code) => found.get(code)).filter((store) => store !== undefined);
}

export type { ProductReference, StoreReference } from "./catalogue-lookup.repository";
