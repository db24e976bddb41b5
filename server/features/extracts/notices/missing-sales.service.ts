import type { EntityManager } from "@mikro-orm/postgresql";
import { firstDayOfWeek, type Day } from "@shared/calendar";
import type { Services } from "../../../services";
import { calendarOf, findChain } from "../../chain";
import { addressOf, salesDue, sendNotice, wasSent } from "../../notices";
import { findLoadedWeeks } from "../extracts.repository";
import { letterOfMissingSales, writingOf } from "./letters";
import { filesWaitingWith } from "./missing-sales.repository";

/** Sales of a week that are not loaded although they were due. */
export type MissingSales = { week: Day; dueOn: Day; lastLoaded: Day };

/**
 * The sales that should be there by now and are not; null where all is well, where their hour has not come, or where
 * nothing was ever loaded, so that nothing is expected yet.
 */
export async function findMissingSales(em: EntityManager, now: Date): Promise<MissingSales | null> {
  const chain = await findChain(em);
  if (!chain) return null;
  const { week, dueOn, isOver } = salesDue(chain, now);
  if (!isOver) return null;
  const { weekStart } = calendarOf(chain);
  const loaded = (await findLoadedWeeks(em)).map((day) => firstDayOfWeek(day, weekStart)).sort();
  const lastLoaded = loaded.at(-1);
  if (lastLoaded === undefined || loaded.includes(week)) return null;
  return { week, dueOn, lastLoaded };
}

/** Whether data admins are yet to be told of sales that are missing. */
export async function mustTellOfMissing(em: EntityManager, now: Date): Promise<MissingSales | null> {
  const missing = await findMissingSales(em, now);
  if (!missing || (await wasSent(em, { notice: "sales-missing", about: missing.week }))) return null;
  return missing;
}

/** Tells the data admins of sales that are missing, once for each week; answers how many were told. */
export function tellOfMissing(services: Services): Promise<number> {
  return services.orm.em.fork().transactional(async (em) => {
    const [missing, chain] = [await findMissingSales(em, services.now()), await findChain(em)];
    if (!missing || !chain) return 0;
    const waiting = await filesWaitingWith(em, missing.week);
    const address = addressOf(services.environment, "/extracts");
    const letter = letterOfMissingSales({ ...missing, dueHour: chain.salesDueHour, waiting, address }, writingOf(chain));
    return sendNotice(em, services, { notice: "sales-missing", about: missing.week, to: { roles: ["data-admin"] }, letter });
  });
}
