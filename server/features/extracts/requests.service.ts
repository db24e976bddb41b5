import type { EntityManager } from "@mikro-orm/postgresql";
import { conflict, notFound } from "../../errors";
import type { Services } from "../../services";
import { lockCheckable } from "./check/lock-checkable";
import type { Extract } from "./extracts.entities";
import { checkExtractJob, loadExtractJob, withdrawExtractJob } from "./extracts.jobs";
import { awaitsLayout } from "./extracts.policy";
import { changesOf, lockExtract } from "./extracts.repository";
import type { Actor } from "./load/load-extract.service";
import { secondLookNeeded } from "./load/second-look";
import { requireWithdrawable } from "./load/withdraw-extract.service";

/** Where an extract can be read. */
export const pathOf = (extractId: string) => `/api/extracts/${extractId}`;

type Asked = { services: Services; extractId: string; actor: Actor };
type AskedLoad = Asked & { /** Whether the caller has looked at what is unusual about it. */ secondLook?: boolean };

/** The actor as a job's payload keeps it. */
const kept = ({ personId, tokenId, requestId }: Actor) => ({ personId, tokenId: tokenId ?? null, requestId: requestId ?? null });

async function locked(em: EntityManager, extractId: string): Promise<Extract> {
  const extract = await lockExtract(em, extractId);
  if (!extract) throw notFound("extract");
  return extract;
}

/** Puts a check into the queue, in the context's transaction, and notes its job with the extract. */
export async function enqueueCheck(em: EntityManager, { services, extract, personId }: { services: Services; extract: Extract; personId: string }): Promise<string> {
  const options = { personId, subject: pathOf(extract.id), singletonKey: `check:${extract.id}` };
  extract.jobId = await services.queue.enqueue(em, checkExtractJob, { extractId: extract.id }, options);
  return extract.jobId;
}

/**
 * Has a file checked again, in the background; while it waits or runs already, that job is answered.
 *
 * @throws ProblemError 404, or 409 where it is loaded or being loaded.
 */
export function requestCheck(em: EntityManager, { services, extractId, actor }: Asked): Promise<string> {
  return em.transactional(async (inner) => {
    const extract = await lockCheckable(inner, extractId);
    return enqueueCheck(inner, { services, extract, personId: actor.personId });
  });
}

/**
 * Has a checked file loaded, in the background; while that waits or runs already, its job is answered.
 *
 * @throws ProblemError 404, or 409 where the file is not checked, loaded already, read by a layout that nobody has confirmed,
 * or would change so much that it needs a second look.
 */
export function requestLoad(em: EntityManager, { services, extractId, actor, secondLook = false }: AskedLoad): Promise<string> {
  return em.transactional(async (inner) => {
    const extract = await locked(inner, extractId);
    if (extract.state === "loading" && extract.jobId != null) return extract.jobId;
    if (extract.state !== "checked") throw notLoadable(extract);
    if (awaitsLayout(extract)) throw layoutUnconfirmed();
    const reasons = (await changesOf(inner, extract))?.secondLook ?? [];
    if (reasons.length > 0 && !secondLook) throw secondLookNeeded(reasons);
    const options = { personId: actor.personId, subject: pathOf(extractId), singletonKey: `load:${extractId}` };
    extract.jobId = await services.queue.enqueue(inner, loadExtractJob, { extractId, actor: kept(actor), seen: reasons }, options);
    extract.state = "loading";
    extract.failure = null;
    return extract.jobId;
  });
}

/** What a load is refused by while nobody has looked at how the file is read. */
export const layoutUnconfirmed = () => conflict(
  "layout-unconfirmed",
  'How this file is read was worked out from its first rows and is not confirmed yet. Look at it under "How it is read", confirm or correct it, and load the file then.',
);

function notLoadable({ state }: Extract) {
  if (state === "loaded") return conflict("already-loaded", "This extract is loaded already. Nothing was changed.");
  if (state === "unusable") return conflict("not-checked", "This file cannot be used; its reason says why. Upload a corrected one.");
  if (state === "withdrawn") return conflict("not-checked", "This extract was withdrawn. Upload the file again to load it.");
  return conflict("not-checked", "This file is not checked yet. Wait for its check to end.");
}

/**
 * Has a loaded file withdrawn, in the background; while that waits or runs already, its job is answered.
 *
 * @throws ProblemError as `requireWithdrawable`.
 */
export function requestWithdrawal(em: EntityManager, { services, extractId, actor }: Asked): Promise<string> {
  return em.transactional(async (inner) => {
    const extract = await locked(inner, extractId);
    await requireWithdrawable(inner, extract);
    const options = { personId: actor.personId, subject: pathOf(extractId), singletonKey: `withdraw:${extractId}` };
    extract.jobId = await services.queue.enqueue(inner, withdrawExtractJob, { extractId, actor: kept(actor) }, options);
    return extract.jobId;
  });
}
