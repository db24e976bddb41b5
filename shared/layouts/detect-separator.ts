import { separatorSchema, type Separator } from "../contract/layouts";
import { typeOfValue } from "./column-profile";
import { shareOf, type Detected, type LayoutWarning } from "./detected";
import { splitRecords } from "./split-records";

/** Enough records to tell; more take time only. */
const mostRecords = 200;
const signNames: Record<Separator, string> = { ",": "commas", ";": "semicolons", "\t": "tabs", "|": "bars" };

type Judged = { separator: Separator; width: number; consistency: number; score: number };

/**
 * The separator of a text: the one that gives most records the same number of fields outside quotes, of which most are whole
 * values (numbers, days). The second part tells "1;2,5;3,5" apart, which is as regular by its commas.
 *
 * @example detectSeparator("a;b\n1,5;2\n", { isCut: false }).value // ";"
 */
export function detectSeparator(text: string, { isCut }: { isCut: boolean }): Detected<Separator> {
  const judged = separatorSchema.options.map((separator) => judge(separator, splitRecords(text, { separator, isCut, most: mostRecords })));
  const best = judged.reduce((first, second) => (second.score > first.score ? second : first));
  if (best.width < 2) {
    const message = "No separator was found: the file seems to have a single column.";
    return { value: ",", confidence: 0.3, warnings: [{ code: "no-separator", message }] };
  }
  const others = judged.filter(({ separator }) => separator !== best.separator).map(({ score }) => score);
  const lead = best.score - Math.max(...others);
  return {
    value: best.separator,
    confidence: lead < 0.1 ? 0.5 : Math.max(0.5, Math.round(best.consistency * 100) / 100),
    warnings: [...tie(best, judged, lead), ...ragged(best)],
  };
}

function judge(separator: Separator, records: string[][]): Judged {
  const width = commonest(records.map(({ length }) => length));
  const regular = records.filter(({ length }) => length === width);
  const consistency = records.length === 0 ? 0 : regular.length / records.length;
  if (width < 2) return { separator, width, consistency, score: 0 };
  const typed = shareOf(regular.flat(), (field) => ["day", "number"].includes(typeOfValue(field)));
  // Width decides only between equals: names alone, in which one sign or the other stands.
  return { separator, width, consistency, score: consistency * (1 + typed) + Math.min(width, 50) / 1_000 };
}

/** The commonest of some lengths, the first of equals; 0 where there is none. */
export function commonest(lengths: readonly number[]): number {
  const counts = new Map<number, number>();
  for (const length of lengths) counts.set(length, (counts.get(length) ?? 0) + 1);
  return [...counts].reduce((best, [length, count]) => (count > best[1] ? [length, count] : best), [0, 0])[0] ?? 0;
}

function tie(best: Judged, judged: readonly Judged[], lead: number): LayoutWarning[] {
  if (lead >= 0.1) return [];
  const names = judged.filter(({ score }) => best.score - score < 0.1).map(({ separator }) => signNames[separator]);
  return [{ code: "separator-ambiguous", message: `Columns may be separated by ${names.join(" or by ")}; ${signNames[best.separator]} are taken.` }];
}

function ragged({ consistency, width }: Judged): LayoutWarning[] {
  if (consistency >= 0.98) return [];
  const share = Math.round((1 - consistency) * 100);
  return [{ code: "ragged-rows", message: `${share} % of the first rows have more or fewer than ${width} fields.` }];
}
