import type { EntityManager } from "@mikro-orm/postgresql";
import { addWeeks, CalendarError, parseWeek, weeksBetween, type Day } from "@shared/calendar";
import type { TemperatureWeek } from "@shared/contract/catalogue-temperatures";
import { notFound, unusable } from "../../../errors";
import { calendarOf, getChain } from "../../chain";
import { TemperatureEntity, type Temperature } from "../catalogue.entities";
import type { Write } from "../changes/author";
import { changing } from "../changes/catalogue-lock.repository";
import { recordChange } from "../changes/record-change";
import { requireSeen, versionOf } from "../changes/versions";
import { requireStoreAt } from "../codes-named.repository";
import { temperatureValues } from "../describe";
import { isRegion } from "../events/events.repository";
import { findLastChange } from "../history/history.repository";
import { normalTemperature, usualRange } from "./normal-temperature";
import { findTemperature, findTemperaturesOf, type Place } from "./temperatures.repository";

export type Named = { scope: "region" | "store"; place: string };

const mostWeeks = 530;

/** Weeks of a place with what was measured and what is usual; `firstKnown` and `lastKnown` bound what was measured. */
export type Weeks = { items: TemperatureWeek[]; firstKnown: Day | null; lastKnown: Day | null };

/**
 * Weekly temperatures of a region or store. A store's own go before its region's, for the normals too, as in plans.
 *
 * @throws ProblemError 404 for a place that is none, 422 for weeks that are none of the chain's, or too many.
 */
export async function listTemperatures(em: EntityManager, { first, last, ...named }: Named & { first: Day; last: Day }): Promise<Weeks> {
  const { place, region } = await placeOf(em, named);
  await requireWeeks(em, { first, last });
  const own = await findTemperaturesOf(em, place);
  const regions = region === null ? [] : await findTemperaturesOf(em, { region, storeCode: "" });
  const rows = new Map([...regions, ...own].map((row) => [row.week, row]));
  const history = [...rows.values()].map(({ week, temperatureC }) => ({ week, temperatureC }));
  const [normal, range] = [normalTemperature(history), usualRange(history)];
  const items = weeksBetween(first, last).map((week): TemperatureWeek => {
    const row = rows.get(week);
    const usual = range(week);
    return { ...measured(row, named.scope), week, normalC: normal(week), lowC: usual?.lowC ?? null, highC: usual?.highC ?? null };
  });
  const known = history.map(({ week }) => week).sort();
  return { items, firstKnown: known[0] ?? null, lastKnown: known.at(-1) ?? null };
}

function measured(row: Temperature | undefined, scope: Named["scope"]): Pick<TemperatureWeek, "temperatureC" | "source" | "version"> {
  if (!row) return { temperatureC: null, source: null, version: null };
  const source = row.storeCode === "" ? "region" : "store";
  return { temperatureC: row.temperatureC, source, version: source === scope ? versionOfTemperature(row) : null };
}

type At = Named & { week: Day; write: Write };

/** Enters or changes a week's temperature. @throws ProblemError 404, 412, or 422 for a week that is none of the chain's. */
export async function putTemperature(em: EntityManager, { temperatureC, ...at }: At & { temperatureC: number }): Promise<TemperatureWeek> {
  await changing(em, async (inner) => {
    const { place, row } = await seenTemperature(inner, at);
    const before = row ? temperatureValues(row) : null;
    const written = row ? inner.assign(row, { temperatureC }) : inner.create(TemperatureEntity, { ...place, week: at.week, temperatureC });
    inner.persist(written);
    recordChange(inner, { by: at.write.by, what: "temperature", code: at.place, before, after: temperatureValues(written) });
  });
  const { items } = await listTemperatures(em.fork(), { ...at, first: at.week, last: at.week });
  const [week] = items;
  if (!week) throw notFound("temperature");
  return week;
}

/** Removes a week's temperature. @throws ProblemError 404 or 412. */
export function removeTemperature(em: EntityManager, at: At): Promise<void> {
  return changing(em, async (inner) => {
    const { row } = await seenTemperature(inner, at);
    if (!row) throw notFound("temperature");
    inner.remove(row);
    recordChange(inner, { by: at.write.by, what: "temperature", code: at.place, before: temperatureValues(row), after: null });
  });
}

const versionOfTemperature = (row: Temperature) => versionOf(temperatureValues(row));

async function seenTemperature(em: EntityManager, { week, write, ...named }: At) {
  const { place } = await placeOf(em, named);
  await requireWeeks(em, { first: week, last: week });
  const row = await findTemperature(em, { ...place, week });
  await requireSeen({
    seen: write.seen, version: row && versionOfTemperature(row), what: `the temperature of ${named.place} in the week of ${week}`,
    lastChange: () => findLastChange(em, { kind: "temperature", what: "temperature", code: named.place }),
  });
  return { place, row };
}

/** The place as rows name it, and the region that a store falls back to. */
async function placeOf(em: EntityManager, { scope, place }: Named): Promise<{ place: Place; region: string | null }> {
  if (scope === "store") return { place: { region: "", storeCode: place }, region: (await requireStoreAt(em, place)).region };
  if (!(await isRegion(em, place))) throw notFound("region");
  return { place: { region: place, storeCode: "" }, region: null };
}

async function requireWeeks(em: EntityManager, { first, last }: { first: Day; last: Day }): Promise<void> {
  const calendar = calendarOf(await getChain(em));
  for (const [path, week] of [["first", first], ["last", last]] as const) {
    try {
      parseWeek(calendar, week);
    } catch (error) {
      if (error instanceof CalendarError) throw field(first === last ? "week" : path, error.message);
      throw error;
    }
  }
  if (last < first) throw field("last", "The last week lies before the first.");
  if (last > addWeeks(first, mostWeeks - 1)) throw field("last", `At most ${mostWeeks} weeks are answered at once.`);
}

const field = (path: string, message: string) => unusable("invalid-week", message, [{ path, message }]);
