import type { EntityManager } from "@mikro-orm/postgresql";
import type { Chain } from "@shared/contract/chain";
import { notFound, unusable } from "../../errors";
import type { Caller } from "../../http/route";
import { audit } from "../accounts";
import { ChainEntity, type ChainRow } from "./chain.entities";
import { chainId, findChain } from "./chain.repository";
import { chainFaults } from "./chain-faults";

/** What a new installation begins with, until an administrator says otherwise. */
export const defaultChain: Chain = {
  name: "My chain",
  currency: "EUR",
  locale: "en-GB",
  timeZone: "Europe/London",
  calendar: "iso",
  weekStart: 1,
  temperatureUnit: "celsius",
  intervalLevel: 0.8,
  uploadLimitBytes: 2 * 1024 ** 3,
  secondLookShare: 0.25,
  salesDueDay: 1,
  salesDueHour: 12,
};

/** The chain's settings. @throws ProblemError 404 before the chain was set up. */
export async function getChain(em: EntityManager): Promise<ChainRow> {
  const row = await findChain(em);
  if (!row) throw notFound("chain: it is set up when its first administrator is created");
  return row;
}

/** Sets the chain up where it is not yet, and flushes; settings that exist are left alone. */
export async function ensureChain(em: EntityManager, settings: Partial<Chain> = {}): Promise<ChainRow> {
  const existing = await findChain(em);
  if (existing) return existing;
  const row = em.create(ChainEntity, { id: chainId, ...defaultChain, ...settings });
  await em.persist(row).flush();
  return row;
}

type Change = { caller: Caller; requestId: string };

/**
 * Changes the chain's settings.
 *
 * @throws ProblemError 422 for a time zone, locale or currency that does not exist, or a week start that does not fit
 * the calendar.
 */
export async function changeChain(
  em: EntityManager,
  settings: Partial<Chain>,
  { caller, requestId }: Change,
): Promise<ChainRow> {
  const row = await getChain(em);
  const before = { ...row };
  em.assign(row, settings);
  const faults = chainFaults(row);
  const [first] = faults;
  if (first) throw unusable("invalid-settings", first.message, faults);
  const changed = (Object.keys(settings) as (keyof Chain)[]).filter((key) => before[key] !== row[key]);
  if (changed.length === 0) return row;
  const detail = Object.fromEntries(changed.map((key) => [key, { from: before[key], to: row[key] }]));
  audit(em, {
    personId: caller.personId,
    tokenId: caller.tokenId,
    action: "settings.changed",
    subject: { kind: "chain" },
    detail,
    requestId,
  });
  await em.flush();
  return row;
}
