import type { EntityManager } from "@mikro-orm/postgresql";
import { randomUUID } from "node:crypto";
import type { Day } from "@shared/calendar";
import type { ModelSpec } from "@shared/engine";
import { unusable } from "../../../errors";
import { PersonEntity } from "../../accounts";
import { ProductEntity } from "../../catalogue";
import { requireProduct, requireStores, type ProductReference } from "../catalogue-lookup";
import { ModelEntity, type ModelRow } from "../drivers.entities";
import { storesThatSold } from "../sales/sales.repository";
import { requireModestSpec } from "./spec-size";

/** What a person, script or the demo asks to have fitted. */
export type FitRequest = {
  /** Code of the product. */
  product: string;
  /** Store codes; all stores that sold the product when absent. */
  stores?: readonly string[];
  weeks?: { first: Day; last: Day };
  /** The default specification of each store when absent. */
  spec?: ModelSpec;
  personId: string;
  tokenId?: string | null;
  requestId?: string | null;
};

export type StoreKey = { id: number; code: string };

/** A request whose codes were found. */
export type CheckedRequest = FitRequest & { productFound: ProductReference; storesFound: StoreKey[] };

/**
 * Finds what a request names.
 *
 * @throws ProblemError 422 for an unknown product or store, weeks the wrong way round, a specification beyond all measure,
 * or a product nobody sold.
 */
export async function checkRequest(em: EntityManager, request: FitRequest): Promise<CheckedRequest> {
  const { weeks } = request;
  if (weeks && weeks.first > weeks.last) {
    const detail = `The first week ${weeks.first} lies after the last one ${weeks.last}. Give them the other way round.`;
    throw unusable("weeks-reversed", detail, [{ path: "weeks.first", message: detail }]);
  }
  if (request.spec) requireModestSpec(request.spec);
  const productFound = await requireProduct(em, request.product);
  const storesFound = request.stores
    ? await requireStores(em, request.stores)
    : await storesThatSold(em, { productId: productFound.id, ...weeks });
  if (storesFound.length > 0) return { ...request, productFound, storesFound };
  throw unusable(
    "no-sales",
    `No store has weeks of product "${request.product}"${within(weeks)}. Load a sales extract first.`,
  );
}

/** Says between which weeks something was looked for, for the end of a sentence. */
export function within(weeks: FitRequest["weeks"]): string {
  return weeks ? ` between ${weeks.first} and ${weeks.last}` : "";
}

/** Makes the model's row, a candidate without fits; it is written with the caller's flush. */
export function addModel(em: EntityManager, { request, at }: { request: CheckedRequest; at: Date }): ModelRow {
  const model = em.create(ModelEntity, {
    id: randomUUID(),
    product: em.getReference(ProductEntity, request.productFound.id),
    spec: request.spec ?? null,
    firstWeek: request.weeks?.first ?? null,
    lastWeek: request.weeks?.last ?? null,
    createdBy: em.getReference(PersonEntity, request.personId),
    createdAt: at,
  });
  em.persist(model);
  return model;
}
