import type { EntityManager } from "@mikro-orm/postgresql";
import type { Day } from "@shared/calendar";
import type { UnknownCodes } from "@shared/contract/unknown-codes";
import { conflict, unusable } from "../../../errors";
import type { Services } from "../../../services";
import { enterProducts, enterStores } from "../../catalogue";
import { lockCheckable } from "../check/lock-checkable";
import { unknownCodesOf } from "../extracts.repository";
import { getExtract } from "../extracts.service";
import type { Actor } from "../load/load-extract.service";
import { enqueueCheck } from "../requests.service";

export type NewCodes = {
  stores: { code: string; name: string; region: string; opened: Day | null }[];
  products: { code: string; name: string; category: string; brand: string | null }[];
};

const none: UnknownCodes = { stores: [], storesTotal: 0, products: [], productsTotal: 0 };

/** Stores and products that the catalogue lacked when the file was last checked. @throws ProblemError 404. */
export async function getUnknownCodes(em: EntityManager, extractId: string): Promise<UnknownCodes> {
  return (await unknownCodesOf(em, await getExtract(em, extractId))) ?? none;
}

type Entry = NewCodes & { services: Services; extractId: string; actor: Actor };

/**
 * Enters stores and products that an extract names into the catalogue, and has the file checked again, in the background.
 * What somebody else has entered meanwhile is left as it is.
 *
 * @returns the check's job.
 * @throws ProblemError 404; 409 where the file is loaded, being loaded or being checked; 422 for nothing, a code given twice, or one that the file does not name.
 */
export function enterUnknownCodes(em: EntityManager, { services, extractId, actor, stores, products }: Entry): Promise<string> {
  return em.transactional(async (inner) => {
    const extract = await lockCheckable(inner, extractId);
    // That check has read the catalogue already, and would not know what is entered now.
    if (extract.state === "checking") throw conflict("being-checked", "This file is being checked just now. Wait for its check to end, and try again.");
    const known = (await unknownCodesOf(inner, extract)) ?? none;
    requireSome({ stores, products });
    requireNamed(stores, { part: "stores", named: known.stores, total: known.storesTotal });
    requireNamed(products, { part: "products", named: known.products, total: known.productsTotal });
    await enterStores(inner, { stores, by: actor });
    await enterProducts(inner, { products, by: actor });
    return enqueueCheck(inner, { services, extract, personId: actor.personId });
  });
}

function requireSome({ stores, products }: NewCodes): void {
  if (stores.length + products.length > 0) return;
  const message = "Choose at least one store or product to enter.";
  throw unusable("nothing-to-enter", message, [{ path: "stores", message }]);
}

type Named = { part: "stores" | "products"; named: readonly { code: string }[]; total: number };

function requireNamed(entries: readonly { code: string }[], { part, named, total }: Named): void {
  const codes = new Set(named.map(({ code }) => code));
  const isWhole = named.length === total;
  const seen = new Set<string>();
  for (const [at, { code }] of entries.entries()) {
    if (isWhole && !codes.has(code)) refuse("not-named", `${part}.${at}.code`, `The file does not wait for ${code}. Enter it in the catalogue itself.`);
    if (seen.has(code)) refuse("repeated-code", `${part}.${at}.code`, `${code} is there twice. Leave it in once.`);
    seen.add(code);
  }
}

function refuse(code: string, path: string, message: string): never {
  throw unusable(code, message, [{ path, message }]);
}
