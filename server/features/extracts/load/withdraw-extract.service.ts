import type { EntityManager } from "@mikro-orm/postgresql";
import { conflict, notFound, unusable } from "../../../errors";
import type { Services } from "../../../services";
import { audit } from "../../accounts";
import { quietly, type Progress } from "../check/progress";
import { countInLater } from "../coverage/count-in-later";
import { lockCoverage, noteBeforeWithdrawal } from "../coverage/coverage.repository";
import type { Extract } from "../extracts.entities";
import { findExtract, lockExtract } from "../extracts.repository";
import type { Actor } from "./load-extract.service";
import { lockLoads } from "./load-lock.repository";
import { countConfirmed, countReplaced, restoreBefore } from "./withdrawal.repository";

const count = new Intl.NumberFormat("en-GB");

/**
 * Refuses where an extract cannot be withdrawn, and says why.
 *
 * @throws ProblemError 404; 409 where it is not loaded, or a later one holds rows of the same products, stores and weeks;
 * 422 for kinds other than sales.
 */
export async function requireWithdrawable(em: EntityManager, extract: Extract): Promise<void> {
  if (extract.kind !== "sales") {
    throw unusable("not-withdrawable", `Only sales are withdrawn. To undo a file of ${extract.kind}, load the earlier one again.`);
  }
  if (extract.state !== "loaded") throw conflict("not-loaded", `This extract is ${extract.state}: only one that is loaded can be withdrawn.`);
  const replaced = await countReplaced(em, extract.id);
  const confirmed = await countConfirmed(em, extract.id);
  const by = replaced.by ?? confirmed.by;
  if (by === null) return;
  const total = replaced.rows + confirmed.rows;
  const rows = total === 1 ? "one row" : `${count.format(total)} rows`;
  const detail = `${by}, loaded later, holds the same products, stores and weeks in ${rows}. Withdraw that first, or load a corrected file over both.`;
  throw conflict("touched-later", detail);
}

/**
 * Puts back exactly what was there before an extract was loaded: rows it changed become what they were, rows it added go.
 * Done already, it does nothing.
 *
 * @throws ProblemError as `requireWithdrawable`.
 */
export async function withdrawExtract(
  services: Services, { extractId, actor, progress = quietly }: { extractId: string; actor?: Actor; progress?: Progress },
): Promise<void> {
  await progress({ done: 0, total: 2, message: "Waiting for other loads to end" });
  await services.orm.em.fork().transactional(async (em) => {
    await lockLoads(em);
    const loaded = await findExtract(em, extractId);
    if (!loaded) throw notFound("extract");
    if (loaded.state === "withdrawn") return;
    await requireWithdrawable(em, loaded);
    await progress({ done: 1, total: 2, message: "Putting back what was there before" });
    const range = { first: loaded.firstWeek ?? "-infinity", last: loaded.lastWeek ?? "infinity" };
    await lockCoverage(em);
    await noteBeforeWithdrawal(em, { extractId, range });
    await restoreBefore(em, { id: extractId, firstWeek: range.first, lastWeek: range.last });
    const extract = await lockExtract(em, extractId);
    if (!extract) throw notFound("extract");
    extract.state = "withdrawn";
    extract.withdrawnAt = services.now();
    extract.failure = null;
    const by = actor ?? { personId: extract.uploadedBy.id };
    audit(em, { ...by, action: "extract.withdrawn", subject: { kind: "extract", id: extract.id }, detail: { fileName: extract.fileName } });
    await countInLater(em, { services, extract });
    await progress({ done: 2, total: 2, message: "Withdrawn" });
  });
}

/** Notes with an extract, which stays loaded, why its withdrawal did not come about. */
export function abandonWithdrawal(services: Services, { extractId, error }: { extractId: string; error: { code: string; detail: string } }): Promise<void> {
  return services.orm.em.fork().transactional(async (em) => {
    const extract = await lockExtract(em, extractId);
    if (extract?.state === "loaded") extract.failure = error;
  });
}
