import { extractColumns } from "../contract/extract-columns";
import type { ExtractKind } from "../contract/extract-kinds";
import { most, type ColumnProfile } from "./column-profile";
import type { LayoutWarning } from "./detected";
import { normalName } from "./normal-name";
import { knownNames, type Proposal } from "./propose-mapping";
import { isDayLike, isSerialDay } from "./read-day";

type Mapped = { kind: ExtractKind; profiles: readonly ColumnProfile[]; proposals: readonly Proposal[]; columns: readonly string[] };

const dayColumns = ["week", "opened", "closed", "valid_from", "first_day", "last_day"];
const shortened = /^\d[.,]\d+E\+\d{1,2}$/i;

/** What a person should look at in a proposed mapping. */
export function mappingWarnings({ kind, profiles, proposals, columns }: Mapped): LayoutWarning[] {
  const columnAt = (position: number) => proposals.find((proposal) => proposal.position === position)?.column;
  const isKnownName = knownNames(columns);
  return [
    ...profiles.flatMap((profile) => spreadsheetWarnings(profile, columnAt(profile.position))),
    ...repeatedNames(profiles),
    ...profiles.filter(({ name }) => isWeek(name)).length > 2 ? [weeksAcross] : [],
    ...extractColumns[kind]
      .filter(({ name, needed }) => needed && columns.includes(name) && proposals.every(({ column }) => column !== name))
      .map(({ name }) => ({ code: "column-not-found", message: `No column was found for ${name}, which a ${kind} file needs.` })),
    ...profiles
      .filter(({ position, name, values }) => values.length > 0 && !columnAt(position) && isKnownName(name))
      .map(({ position, name }) => ({ code: "values-do-not-fit", message: `"${name}" is named like a column of ours, which is taken or whose values look otherwise.`, position })),
  ];
}

/** Years alone are no weeks. */
const isWeek = (name: string) => isDayLike(name);

const weeksAcross: LayoutWarning = {
  code: "weeks-across", message: "The header has weeks in it: the file has a column for each week. Export it with a row for each week.",
};

function spreadsheetWarnings({ position, values, serialDays }: ColumnProfile, column: string | undefined): LayoutWarning[] {
  if (column !== undefined && dayColumns.includes(column) && serialDays >= most) {
    const example = values.find(isSerialDay) ?? "";
    return [{ code: "serial-days", message: `Days are written as day numbers of a spreadsheet ("${example}"). Format the column as dates there.`, position }];
  }
  const example = values.find((value) => shortened.test(value));
  return example ? [{ code: "shortened-codes", message: `A spreadsheet has shortened codes to "${example}"; their digits are lost.`, position }] : [];
}

function repeatedNames(profiles: readonly ColumnProfile[]): LayoutWarning[] {
  const names = profiles.map(({ name }) => normalName(name));
  return profiles
    .filter(({ name, position }) => name !== "" && names.indexOf(names[position] ?? "") < position)
    .map(({ name, position }) => ({ code: "repeated-name", message: `The header has "${name}" more than once.`, position }));
}
