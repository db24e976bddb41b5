import type { EntityManager } from "@mikro-orm/postgresql";
import type { ModelSpec } from "@shared/engine";
import { audit } from "../../accounts";
import { findModelInUse, lockProduct, switchModelInUse } from "./models.repository";
import { notForPlans } from "./not-for-plans";

/**
 * The chain's rule: a product's first finished model is put in use by itself, unless plans cannot use it. Called inside
 * the transaction that finishes the model.
 */
export async function useFirstModel(
  em: EntityManager,
  { modelId, productId, spec, at }: { modelId: string; productId: number; spec: ModelSpec | null; at: Date },
): Promise<void> {
  if (spec !== null && notForPlans(spec) !== null) return;
  await lockProduct(em, productId);
  if (await findModelInUse(em, productId)) return;
  await switchModelInUse(em, { modelId, productId, personId: null, at });
  audit(em, {
    personId: null,
    action: "model.used",
    subject: { kind: "model", id: modelId },
    detail: { rule: "first model of its product" },
  });
}
