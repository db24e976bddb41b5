import { lastDayOfWeek, type Day } from "@shared/calendar";
import type { ExtractChanges, IssueCount } from "@shared/contract/extracts";
import type { Letter } from "../../notices";

/** Reasons named in a letter; the page lists all. */
const mostReasons = 5;

/** How the chain writes numbers and days. */
export type Writing = { number: (value: number) => string; day: (day: Day) => string; moment: (moment: Date) => string };

export function writingOf({ locale, timeZone }: { locale: string; timeZone: string }): Writing {
  const numbers = new Intl.NumberFormat(locale);
  const days = new Intl.DateTimeFormat(locale, { dateStyle: "long", timeZone: "UTC" });
  const moments = new Intl.DateTimeFormat(locale, { dateStyle: "long", timeStyle: "short", timeZone });
  return {
    number: (value) => numbers.format(value),
    day: (day) => days.format(new Date(`${day}T00:00:00Z`)),
    moment: (moment) => moments.format(moment),
  };
}

type Counted = (count: number, one: string, many: string) => string;
const countedBy = ({ number }: Writing): Counted => (count, one, many) => `${number(count)} ${count === 1 ? one : many}`;

export type CheckedFacts = {
  fileName: string;
  kind: string;
  uploadedBy: string;
  uploadedAt: Date;
  /** Null where the file cannot be used at all; `failure` then says why. */
  rows: { read: number; usable: number; errors: number } | null;
  failure: string | null;
  reasons: readonly IssueCount[];
  /** Whether a person must confirm how the file is read before it is loaded. */
  isProposal: boolean;
  /** Of the file's page. */
  address: string | null;
};

/** Says what a check found that someone must see to, and what to do. */
export function letterOfCheck(facts: CheckedFacts, writing: Writing): Letter {
  const { fileName, kind, uploadedBy, uploadedAt, rows, failure, isProposal, address } = facts;
  const counted = countedBy(writing);
  const arrived = `The file ${fileName} (${kind}), which ${uploadedBy} uploaded on ${writing.moment(uploadedAt)}, has been checked.`;
  const page = pageOf("The file's page", address);
  if (rows === null || rows.usable === 0) {
    const paragraphs = [`${arrived} It cannot be used as it is:`, failure ?? "None of its rows can be used.", ...reasonsOf(facts, writing)];
    return { subject: `${fileName} cannot be used`, paragraphs: [...paragraphs, `Nothing was loaded. ${page}`] };
  }
  const toConfirm = isProposal
    ? ["Its columns are not those of any layout that is saved, so how it is read was worked out from the file itself. Someone must look at that and confirm it before the file can be loaded; saved as a layout, the next file of this source is recognised."]
    : [];
  if (rows.errors === 0) {
    return { subject: `${fileName}: confirm how it is read`, paragraphs: [arrived, ...toConfirm, `Nothing is loaded until someone does so. ${page}`] };
  }
  const lacking = `${writing.number(rows.usable)} of its ${counted(rows.read, "row", "rows")} can be used; ${counted(rows.errors, "error was", "errors were")} found in the others.`;
  const toDo = `What to do: look at the lines on the file's page, have them corrected in the system the file comes from and upload it again, or load the rows that can be used. Nothing is loaded until someone does so. ${page}`;
  return { subject: `${fileName}: ${counted(rows.errors, "error", "errors")} found`, paragraphs: [`${arrived} ${lacking}`, ...reasonsOf(facts, writing), ...toConfirm, toDo] };
}

function reasonsOf({ reasons }: CheckedFacts, writing: Writing): string[] {
  const errors = reasons.filter(({ severity }) => severity === "error");
  if (errors.length === 0) return [];
  const counted = countedBy(writing);
  const lines = errors.slice(0, mostReasons).map(({ reason, count }) => `- ${reason}: ${counted(count, "time", "times")}`);
  const more = errors.length - lines.length;
  return [["What is wrong:", ...lines, ...(more > 0 ? [`- and ${counted(more, "other reason", "other reasons")}`] : [])].join("\n")];
}

export type LoadedFacts = {
  fileName: string;
  kind: string;
  loadedBy: string;
  changes: Pick<ExtractChanges, "totals" | "weeks">;
  /** Of the file's page, and of the page where curves are fitted anew. */
  address: string | null;
  driversAddress: string | null;
};

/** Says what was loaded, and what follows from it. */
export function letterOfLoad({ fileName, kind, loadedBy, changes, address, driversAddress }: LoadedFacts, writing: Writing): Letter {
  const { totals, weeks } = changes;
  const isSales = kind === "sales";
  const done = `${loadedBy} loaded the file ${fileName} (${kind}).`;
  const page = pageOf("The file's page", address);
  if (totals.new === 0 && totals.changed === 0) {
    return { subject: `${fileName} brought nothing new`, paragraphs: [`${done} Every row was there already, so nothing has changed. ${page}`] };
  }
  const rows = [
    `New rows: ${writing.number(totals.new)}`, `Changed rows: ${writing.number(totals.changed)}`, `Rows that were there already: ${writing.number(totals.same)}`,
  ].join("\n");
  const next = isSales
    ? [`Curves and scenarios are as they were. To have curves learn from it, open a product on Drivers and choose Fit anew. ${pageOf("Drivers", driversAddress)}`]
    : [];
  return {
    subject: isSales ? `Sales of ${weeksIn(weeks.map(({ week }) => week), writing)} loaded` : `${fileName} is loaded`,
    paragraphs: [`${done}${isSales ? ` It holds sales of ${weeksIn(weeks.map(({ week }) => week), writing)}.` : ""}`, rows, ...next, page],
  };
}

/** "the week of 8 June 2026", or how many weeks and from when to when. */
function weeksIn(weeks: readonly Day[], { number, day }: Writing): string {
  const [first, last] = [weeks[0], weeks.at(-1)];
  if (first === undefined || last === undefined) return "no week";
  if (first === last) return `the week of ${day(first)}`;
  return `${number(weeks.length)} weeks (${day(first)} to ${day(lastDayOfWeek(last))})`;
}

export type MissingFacts = {
  week: Day;
  dueOn: Day;
  dueHour: number;
  lastLoaded: Day | null;
  /** Names of files that hold the week and are checked, but not loaded. */
  waiting: readonly string[];
  address: string | null;
};

/** Says that the sales of the week that ended last are not there although they were due. */
export function letterOfMissingSales({ week, dueOn, dueHour, lastLoaded, waiting, address }: MissingFacts, { day }: Writing): Letter {
  const due = `${day(dueOn)}, ${String(dueHour).padStart(2, "0")}:00`;
  const last = lastLoaded === null ? "" : ` The last week loaded is that of ${day(lastLoaded)}.`;
  const toDo = waiting.length > 0
    ? `What to do: ${waiting.join(", ")} ${waiting.length === 1 ? "holds" : "hold"} that week, and only need${waiting.length === 1 ? "s" : ""} to be loaded.`
    : "What to do: upload the week's file. If a script brings it, see whether it ran and whether its access token has expired; else ask those who run the system that the file comes from.";
  return {
    subject: `Sales of the week of ${day(week)} are missing`,
    paragraphs: [
      `The sales of ${day(week)} to ${day(lastDayOfWeek(week))} were due by ${due}, and are not loaded.${last}`,
      `${toDo} ${pageOf("Extracts", address)}`,
      "Until they are there, curves and scenarios know nothing of that week. This reminder comes once a week.",
    ],
  };
}

function pageOf(name: string, address: string | null): string {
  return address === null ? `(${name} in Shelftide.)` : `${name}: ${address}`;
}
