import { firstDayOfWeek, parseWeekStart, weekdayNames, weeksApart, type Day } from "@shared/calendar";
import type { ScenarioDraft } from "@shared/contract/scenarios";

/** Something a plan must not have: a code for programs, where it is, and a sentence for people. */
export type DraftFault = { code: string; path: string; message: string };

const mostWeeks = 104;
/** More would keep a browser and a server busy for seconds at every change. */
const mostStoreWeeks = 20_000;

/**
 * What is wrong with a plan's weeks: the order, the chain's week start, the number.
 *
 * @param path of the first and the last week in what was sent.
 */
export function weekFaults({
  weeks,
  weekStart,
  path = { first: "weeks.first", last: "weeks.last" },
}: {
  weeks: { first: Day; last: Day };
  weekStart: number;
  path?: { first: string; last: string };
}): DraftFault[] {
  const faults = [
    startFault(weeks.first, { weekStart, path: path.first }),
    startFault(weeks.last, { weekStart, path: path.last }),
  ];
  const found = faults.filter((fault) => fault !== null);
  if (found.length > 0) return found;
  const count = weeksApart(weeks.first, weeks.last) + 1;
  if (count < 1) {
    return [
      {
        code: "weeks-reversed",
        path: path.first,
        message: `The first week ${weeks.first} lies after the last one ${weeks.last}.`,
      },
    ];
  }
  if (count > mostWeeks) {
    return [
      {
        code: "too-many-weeks",
        path: path.last,
        message: `${weeks.first} to ${weeks.last} are ${count} weeks: a plan has at most ${mostWeeks}.`,
      },
    ];
  }
  return [];
}

function startFault(week: Day, { weekStart, path }: { weekStart: number; path: string }): DraftFault | null {
  const start = firstDayOfWeek(week, parseWeekStart(weekStart));
  if (start === week) return null;
  const weekday = weekdayNames[parseWeekStart(weekStart)];
  const named = `${weekday.charAt(0).toUpperCase()}${weekday.slice(1)}`;
  const message = `Weeks of this chain begin on a ${named}: write ${start} for the week of ${week}.`;
  return { code: "not-a-week", path, message };
}

/** What is wrong with a plan's size, stores and cells, apart from codes that do not exist; its weeks are right. */
export function cellFaults({
  stores,
  weeks,
  cells,
}: Pick<ScenarioDraft, "stores" | "weeks" | "cells">): DraftFault[] {
  const faults: DraftFault[] = [];
  const planned = new Set(stores);
  const storeWeeks = planned.size * (weeksApart(weeks.first, weeks.last) + 1);
  if (storeWeeks > mostStoreWeeks) {
    faults.push({
      code: "too-many-store-weeks",
      path: "stores",
      message: `${storeWeeks} store-weeks are too many: a plan has at most ${mostStoreWeeks}.`,
    });
  }
  stores.forEach((store, index) => {
    if (stores.indexOf(store) < index)
      faults.push({ code: "store-repeated", path: `stores.${index}`, message: `Store "${store}" comes twice.` });
  });
  const seen = new Set<string>();
  cells.forEach(({ store, week }, index) => {
    const key = `${store}\n${week}`;
    const path = `cells.${index}`;
    if (!planned.has(store))
      faults.push({
        code: "cell-outside-plan",
        path: `${path}.store`,
        message: `Store "${store}" is not one of the plan's stores.`,
      });
    else if (!isPlannedWeek(week, weeks))
      faults.push({
        code: "cell-outside-plan",
        path: `${path}.week`,
        message: `${week} is not one of the plan's weeks.`,
      });
    else if (seen.has(key))
      faults.push({ code: "cell-repeated", path, message: `Store "${store}", week ${week} comes twice.` });
    seen.add(key);
  });
  return faults;
}

function isPlannedWeek(week: Day, { first, last }: { first: Day; last: Day }): boolean {
  return week >= first && week <= last && (Date.parse(week) - Date.parse(first)) % (7 * 86_400_000) === 0;
}
